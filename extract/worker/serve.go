package worker

import (
	"bufio"
	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"runtime/metrics"
	"sync"
	"time"
)

// hiddenArgument makes the program a worker.
const hiddenArgument = "--halfspan-worker-process"

// The exit statuses of a worker, apart from 0 and the 2 of a Go panic.
const (
	statusMemory   = 77 // more memory than it may use
	statusProtocol = 78 // the parent spoke nonsense or is gone
)

// memoryLimit is how much memory a worker may hold. The collector works harder
// from softLimit on, so that only what is really in use counts.
const (
	memoryLimit = 512 << 20
	softLimit   = 400 << 20
	stackLimit  = 64 << 20
)

// Handler does one job in the worker process. It calls alive often: after each
// page, say.
type Handler func(job []byte, alive Alive) ([]byte, error)

// Alive is a sign of life: what is being done in a few words, and how much
// longer than usual the next sign may take (for something like preparing a
// reader once, which has no page to count).
type Alive func(text string, grace time.Duration)

// Serve turns the process into a worker that does its jobs with handle, and
// exits, if the program was started as one. Otherwise it returns at once.
func Serve(handle Handler) {
	if len(os.Args) != 2 || os.Args[1] != hiddenArgument {
		return
	}
	out := os.Stdout
	os.Stdout = os.Stderr // a library that prints must not break the lines
	signal.Ignore(os.Interrupt)
	debug.SetMemoryLimit(softLimit)
	debug.SetMaxStack(stackLimit)
	go watchMemory(memoryLimit, 20*time.Millisecond, func() { os.Exit(statusMemory) })
	os.Exit(serve(handle, os.Stdin, out, os.Exit))
}

// serve does jobs until in ends. A job may spin for ever, so the end of in is
// noticed beside it: exit is called at once.
func serve(handle Handler, in io.Reader, out io.Writer, exit func(int)) int {
	jobs := make(chan message)
	status := 0
	go func() {
		defer close(jobs)
		r := bufio.NewReader(in)
		for {
			m, err := readMessage(r)
			if err != nil || m.Kind != kindJob {
				if err != io.EOF {
					status = statusProtocol
				}
				exit(status)
				return
			}
			jobs <- m
		}
	}()
	var mu sync.Mutex
	send := func(m message) error {
		mu.Lock()
		defer mu.Unlock()
		return writeMessage(out, m)
	}
	if send(message{Kind: kindReady}) != nil {
		return statusProtocol
	}
	for m := range jobs {
		alive := func(text string, grace time.Duration) {
			// A failure shows when the outcome is sent.
			_ = send(message{Kind: kindSign, Text: text, Grace: grace})
		}
		answer := message{Kind: kindDone}
		body, err := handle(m.Body, alive)
		if err != nil {
			answer = message{Kind: kindFailed, Text: err.Error()}
		} else {
			answer.Body = body
		}
		if err := send(answer); err != nil {
			fmt.Fprintln(os.Stderr, "worker:", err)
			return statusProtocol
		}
	}
	return status
}

// watchMemory calls exceeded once the memory that the runtime holds, without
// what it has given back, is above limit.
func watchMemory(limit uint64, every time.Duration, exceeded func()) {
	sample := []metrics.Sample{
		{Name: "/memory/classes/total:bytes"},
		{Name: "/memory/classes/heap/released:bytes"},
	}
	for range time.Tick(every) {
		metrics.Read(sample)
		if sample[0].Value.Uint64()-sample[1].Value.Uint64() > limit {
			exceeded()
			return
		}
	}
}
