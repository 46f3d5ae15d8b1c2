package worker

import (
	"bufio"
	"bytes"
	"reflect"
	"testing"
)

// FuzzReadMessage: whatever comes over the line, reading it ends; a message that
// is read can be written and read again.
func FuzzReadMessage(f *testing.F) {
	seeds := []string{"{\"kind\":\"ready\"}\n", "{\"kind\":\"job\",\"body\":\"aGl2ZQ==\"}\n", "{\"kind\":\"sign\",\"text\":\"page 1\",\"grace\":5}\n{", "nonsense\n", "", "\n\n", "{\"kind\":\"job\",\"body\":\"%\"}\n"}
	for _, s := range seeds {
		f.Add([]byte(s))
	}
	if len(seeds) < 7 {
		f.Fatal("seeds are missing")
	}
	f.Fuzz(func(t *testing.T, line []byte) {
		r := bufio.NewReader(bytes.NewReader(line))
		for {
			m, err := readMessage(r)
			if err != nil {
				return
			}
			var out bytes.Buffer
			if err := writeMessage(&out, m); err != nil {
				t.Fatal(err)
			}
			again, err := readMessage(bufio.NewReader(&out))
			if err != nil || again.Kind != m.Kind || again.Text != m.Text || again.Grace != m.Grace || len(m.Body) > 0 && !reflect.DeepEqual(again, m) {
				t.Fatalf("%+v became %+v, %v", m, again, err)
			}
		}
	})
}
