package worker

import (
	"bufio"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"time"
)

// maxLine bounds one line between the processes, so that a worker gone wild
// cannot fill the parent's memory.
const maxLine = 512 << 20

// message is one line between parent and worker.
type message struct {
	Kind  kind          `json:"kind"`
	Body  []byte        `json:"body,omitempty"`  // the job, or what it gave
	Text  string        `json:"text,omitempty"`  // of a sign: what is being done; of a failure: why
	Grace time.Duration `json:"grace,omitempty"` // of a sign: how much longer than usual the next may take
}

type kind string

const (
	kindReady  kind = "ready"  // worker: started
	kindJob    kind = "job"    // parent: do this
	kindSign   kind = "sign"   // worker: alive
	kindDone   kind = "done"   // worker: here it is
	kindFailed kind = "failed" // worker: the job cannot be done
)

func writeMessage(w io.Writer, m message) error {
	line, err := json.Marshal(m)
	if err != nil {
		return err
	}
	_, err = w.Write(append(line, '\n'))
	return err
}

var errLineTooLong = errors.New("line too long")

// readMessage reads one line of any length up to maxLine; io.EOF where the
// other side has ended between two lines.
func readMessage(r *bufio.Reader) (message, error) {
	var line []byte
	for {
		part, err := r.ReadSlice('\n')
		line = append(line, part...)
		if len(line) > maxLine {
			return message{}, errLineTooLong
		}
		if err == nil {
			break
		}
		if !errors.Is(err, bufio.ErrBufferFull) {
			if err == io.EOF && len(line) > 0 {
				err = io.ErrUnexpectedEOF
			}
			return message{}, err
		}
	}
	var m message
	if err := json.Unmarshal(line, &m); err != nil {
		return message{}, fmt.Errorf("not a message: %w", err)
	}
	return m, nil
}
