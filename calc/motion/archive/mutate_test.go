package archive

import (
	"math/rand/v2"
	"testing"
)

// Cut, spliced and byte-flipped samples are read or refused, and what is read is a record.
func TestDamaged(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 1500 {
		s := samples[r.IntN(len(samples))]
		data := load(t, s.file)
		for range 1 + r.IntN(5) {
			i, j := r.IntN(len(data)), r.IntN(len(data))
			i, j = min(i, j), max(i, j)
			switch r.IntN(5) {
			case 0:
				data[i] = byte(r.IntN(256))
			case 1:
				data[i] = "0123456789.-+eE,;\t\n\r *"[r.IntN(22)]
			case 2:
				data = append(data[:i], data[j:]...)
			case 3:
				data = append(data[:j:j], data[i:]...)
			case 4:
				data = append(append(data[:i:i], "1e-300"...), data[i:]...)
			}
		}
		for _, format := range []string{"", "AT2", "columns", "values"} {
			for _, ask := range []Options{{Format: format}, {Format: format, Channel: s.ask.Channel, Unit: "g", Step: 0.01}} {
				rec, err := Read(s.file, data, ask)
				if err == nil && rec.Validate() != nil {
					t.Fatalf("%q was read as an invalid record: %v", data, rec.Validate())
				}
				if _, ok := err.(*Error); err != nil && !ok {
					t.Fatalf("%q: a %T", data, err)
				}
			}
		}
	}
}

func BenchmarkRead(b *testing.B) {
	text := []byte(rows(20_000))
	b.SetBytes(int64(len(text)))
	for b.Loop() {
		if _, err := Read("x", text, Options{Unit: "g"}); err != nil {
			b.Fatal(err)
		}
	}
}
