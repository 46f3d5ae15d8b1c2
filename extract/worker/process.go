package worker

import (
	"bufio"
	"fmt"
	"io"
	"os"
	"os/exec"
	"strings"
	"sync"
	"time"
)

// process is one running worker.
type process struct {
	cmd      *exec.Cmd
	in       io.WriteCloser
	messages chan message // closed when the worker's output ends
	said     lastWords
}

// start runs one worker; it is ready once it has said so.
func start(command []string, env []string) (*process, error) {
	if len(command) == 0 {
		self, err := os.Executable()
		if err != nil {
			return nil, fmt.Errorf("finding the program's own file to start a worker: %w", err)
		}
		command = []string{self, hiddenArgument}
	}
	p := &process{cmd: exec.Command(command[0], command[1:]...), messages: make(chan message)}
	p.cmd.Env = append(os.Environ(), env...)
	p.cmd.Stderr = &p.said
	// What a killed worker's own children hold open must not keep us waiting.
	p.cmd.WaitDelay = time.Second
	var err error
	if p.in, err = p.cmd.StdinPipe(); err != nil {
		return nil, fmt.Errorf("starting a worker: %w", err)
	}
	out, err := p.cmd.StdoutPipe()
	if err != nil {
		return nil, fmt.Errorf("starting a worker: %w", err)
	}
	if err := p.cmd.Start(); err != nil {
		return nil, fmt.Errorf("starting a worker: %w", err)
	}
	go func() {
		defer close(p.messages)
		r := bufio.NewReader(out)
		for {
			m, err := readMessage(r)
			if err != nil {
				return
			}
			p.messages <- m
		}
	}()
	return p, nil
}

// stop ends the worker, whatever it is doing, and waits until it is gone.
func (p *process) stop() {
	_ = p.in.Close()
	_ = p.cmd.Process.Kill() // fails only where it is gone already
	for range p.messages {
	}
	_ = p.cmd.Wait()
}

// death waits for a worker whose output has ended and says how it died.
func (p *process) death() (Cause, string) {
	_ = p.in.Close()
	// It may only have closed its output, or be talking nonsense.
	kill := time.AfterFunc(2*time.Second, func() { _ = p.cmd.Process.Kill() })
	_ = p.cmd.Wait()
	kill.Stop()
	switch p.cmd.ProcessState.ExitCode() {
	case statusMemory:
		return Memory, fmt.Sprintf("needed more than %d MB of memory", memoryLimit>>20)
	case statusProtocol:
		return Crashed, "lost its connection"
	}
	if line := p.said.panicLine(); line != "" {
		return Crashed, "crashed: " + line
	}
	return Crashed, "crashed: " + p.cmd.ProcessState.String()
}

// lastWords keeps the beginning of what a worker writes to standard error: a Go
// panic says there why it dies.
type lastWords struct {
	mu   sync.Mutex
	text []byte
}

const keptWords = 16 << 10

// Write keeps what still has room and never fails, so that the worker never
// waits.
func (w *lastWords) Write(b []byte) (int, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	if room := keptWords - len(w.text); room > 0 {
		w.text = append(w.text, b[:min(room, len(b))]...)
	}
	return len(b), nil
}

// forget is called when a new job begins.
func (w *lastWords) forget() {
	w.mu.Lock()
	defer w.mu.Unlock()
	w.text = w.text[:0]
}

// panicLine is the line in which the Go runtime says why a process ends.
func (w *lastWords) panicLine() string {
	w.mu.Lock()
	defer w.mu.Unlock()
	for line := range strings.Lines(string(w.text)) {
		for _, mark := range []string{"panic: ", "fatal error: ", "runtime: goroutine stack exceeds"} {
			if rest, ok := strings.CutPrefix(line, mark); ok {
				rest = strings.TrimSpace(rest)
				if mark[0] == 'r' {
					rest = "stack overflow"
				}
				return rest
			}
		}
	}
	return ""
}
