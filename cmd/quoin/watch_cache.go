package main

import "sync"

// memory is a cache of this run of the program, over the one on the disk. What was
// not used for long is forgotten.
type memory struct {
	disk     *diskCache // nil: none
	mu       sync.Mutex
	now, old map[string][]byte
	size     int // of now
}

// memoryLimit is how many bytes are kept before the older ones go.
const memoryLimit = 128 << 20

func newMemory(disk *diskCache) *memory {
	return &memory{disk: disk, now: map[string][]byte{}, old: map[string][]byte{}}
}

// Get is what was put under the key.
func (m *memory) Get(key string) ([]byte, bool) {
	m.mu.Lock()
	data, ok := m.now[key]
	if !ok {
		if data, ok = m.old[key]; ok {
			m.keep(key, data)
		}
	}
	m.mu.Unlock()
	if !ok && m.disk != nil {
		if data, ok = m.disk.Get(key); ok {
			m.Put(key, data)
		}
	}
	return data, ok
}

// Put keeps data, which is not changed any more.
func (m *memory) Put(key string, data []byte) {
	m.mu.Lock()
	defer m.mu.Unlock()
	m.keep(key, data)
}

func (m *memory) keep(key string, data []byte) {
	if m.size += len(data) - len(m.now[key]); m.size > memoryLimit {
		m.old, m.now, m.size = m.now, map[string][]byte{}, len(data)
	}
	m.now[key] = data
}
