package modal

import (
	"testing"

	"quoin/calc/published"
)

func TestPublished(t *testing.T) {
	for _, miss := range published.Misses(Published()) {
		t.Error(miss)
	}
}
