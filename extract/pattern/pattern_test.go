package pattern

import "testing"

func TestPattern(t *testing.T) {
	p := MustCompile(`(\d+)\.(\d+)`)
	if got := p.ReplaceAllString("mass 5.1 kg", "$2.$1"); got != "mass 1.5 kg" {
		t.Errorf("got %q", got)
	}
	if got := p.FindStringSubmatch("5.1"); len(got) != 3 || got[2] != "1" {
		t.Errorf("got %q", got)
	}
	broken := MustCompile(`(`)
	defer func() {
		if recover() == nil {
			t.Error("a broken expression passes")
		}
	}()
	broken.MatchString("")
}
