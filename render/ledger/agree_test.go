package ledger

import (
	"math"
	"testing"
)

// TestAgree: results that differ by more than the tolerance are named, each by its id;
// items of a list count against the largest of their list, and every item counts.
func TestAgree(t *testing.T) {
	const was = `{"values":[{"id":"V","value":1000}],"series":[{"id":"s","y":{"values":[1,2000,3]}}],"checks":[{"id":"c","ok":true}]}`
	for _, c := range []struct {
		now, differs string
		largest      float64
	}{
		{was, "", 0},
		{`{"values":[{"id":"V","value":1000.0000001}],"series":[{"id":"s","y":{"values":[1,2000,3]}}],"checks":[{"id":"c","ok":true}]}`, "", 1e-10},
		{`{"values":[{"id":"V","value":1000.00001}],"series":[{"id":"s","y":{"values":[1,2000,3]}}],"checks":[{"id":"c","ok":true}]}`, "value V", 1e-8},
		{`{"values":[{"id":"V","value":1000}],"series":[{"id":"s","y":{"values":[1.00002,2000,3]}}],"checks":[{"id":"c","ok":true}]}`, "series s", 1e-8},
		{`{"values":[{"id":"V","value":1000}],"series":[{"id":"s","y":{"values":[1,2000]}}],"checks":[{"id":"c","ok":true}]}`, "series s", 0},
		{`{"values":[{"id":"V","value":1000}],"series":[{"id":"s","y":{"values":[1,2000,3]}}],"checks":[{"id":"c","ok":false}]}`, "check c", 0},
		{`{"values":[],"series":[{"id":"s","y":{"values":[1,2000,3]}}],"checks":[{"id":"c","ok":true}]}`, "value V", 0},
		{`{"values":[{"id":"V","value":1000},{"id":"W","value":1}],"series":[{"id":"s","y":{"values":[1,2000,3]}}],"checks":[{"id":"c","ok":true}]}`, "value W", 0},
	} {
		largest, differ, err := Agree([]byte(was), []byte(c.now), Agreement)
		if err != nil {
			t.Fatal(err)
		}
		got := ""
		if len(differ) > 0 {
			got = differ[0].Path
		}
		if got != c.differs || len(differ) > 1 || math.Abs(largest-c.largest) > 0.01*c.largest {
			t.Errorf("%s: %v, largest %.3g; want %q, %.3g", c.now, differ, largest, c.differs, c.largest)
		}
	}
	if _, _, err := Agree([]byte(was), []byte(`{"values":[{"id":"V","value":1},{"id":"V","value":1}]}`), Agreement); err == nil {
		t.Error("an id that stands twice is not seen")
	}
}
