package structure

import (
	"fmt"
	"strings"
	"testing"
)

func TestFalling(t *testing.T) {
	for names, want := range map[string]bool{
		"L1,L2,L3": false, "L3,L2,L1": true, "Roof,L2,L1": true, "L1,L2,Roof": false, "R,2,1": true, "10,9,8": true, "9,10,11": false,
		"B2,B1,L1": false, "B2,B1": false, "L3,M2,L1": false, "L1": false, "Level 3,Level 2": true, "roof,ground": true, "L2,L2": false, "Roof,Penthouse,R": false, "L3,L1,L2": false,
	} {
		if got := Falling(strings.Split(names, ",")); got != want {
			t.Errorf("%s: %v", names, got)
		}
	}
}

func TestLight(t *testing.T) {
	for _, c := range []struct {
		mass []float64
		want string
	}{
		{[]float64{620e3, 620, 600e3}, "[1]"}, {[]float64{100, 2.01, 100}, "[]"}, {[]float64{100, 1.99, 100}, "[1]"},
		{[]float64{100}, "[]"}, {[]float64{1, 100}, "[0]"}, {[]float64{100, 90, 80, 30}, "[]"},
	} {
		if got := fmt.Sprint(Light(c.mass)); got != c.want {
			t.Errorf("%v: %s, want %s", c.mass, got, c.want)
		}
	}
}
