package worker

import (
	"context"
	"fmt"
	"runtime"
	"sync"
	"time"
)

// Options say how a [Pool] works. The zero value is what a scan uses.
type Options struct {
	Workers int           // how many at once; 0: one per core
	Silence time.Duration // longest time between signs of life; 0: 10 s
	Limit   time.Duration // longest time of one job; 0: 60 s

	// Again, where it is not nil, makes of a job the one that is run in its place
	// after a worker was lost over it.
	Again func(job []byte) []byte

	command []string // in tests: what to start instead of the program itself
	env     []string // in tests: added to the worker's environment
}

// Cause says why a job failed.
type Cause uint8

// The causes. Only Refused is the job's own error; after the others the worker
// was replaced and the job run a second time, alone, with the same outcome.
const (
	Refused Cause = iota + 1 // the handler returned an error
	Silent                   // no sign of life in time
	TooLong                  // the job took too long
	Memory                   // it needed too much memory
	Crashed                  // the process died
)

// JobError says that one job failed. The pool goes on.
type JobError struct {
	Name   string // of the job, as given to Do
	Cause  Cause
	Detail string // in plain words
}

func (e *JobError) Error() string { return e.Detail }

// Pool runs jobs in worker processes, started as they are needed and kept for
// the next job. It may be used from several goroutines.
type Pool struct {
	opt   Options
	slots chan *process // one entry per worker; nil where none is started

	// A job that is run once more runs with no other beside it: it holds alone
	// for writing, all others for reading.
	alone sync.RWMutex
}

// NewPool makes a pool; no process is started yet.
func NewPool(opt Options) *Pool {
	if opt.Workers <= 0 {
		opt.Workers = runtime.NumCPU()
	}
	if opt.Silence <= 0 {
		opt.Silence = 10 * time.Second
	}
	if opt.Limit <= 0 {
		opt.Limit = 60 * time.Second
	}
	p := &Pool{opt: opt, slots: make(chan *process, opt.Workers)}
	for range opt.Workers {
		p.slots <- nil
	}
	return p
}

// Do runs one job, waiting for a free worker first, and returns what the handler
// made of it. sign, which may be nil, is called with the text of each sign of
// life. An error is a *[JobError] where it concerns this job only; any other
// means that no worker can be started, or that ctx ended.
func (p *Pool) Do(ctx context.Context, name string, job []byte, sign func(text string)) ([]byte, error) {
	p.alone.RLock()
	out, err := p.attempt(ctx, name, job, sign)
	p.alone.RUnlock()
	if je, ok := err.(*JobError); !ok || je.Cause == Refused {
		return out, err
	}
	p.alone.Lock()
	defer p.alone.Unlock()
	if p.opt.Again != nil {
		job = p.opt.Again(job)
	}
	return p.attempt(ctx, name, job, sign)
}

func (p *Pool) attempt(ctx context.Context, name string, job []byte, sign func(string)) ([]byte, error) {
	var w *process
	select {
	case w = <-p.slots:
	case <-ctx.Done():
		return nil, ctx.Err()
	}
	keep := false
	defer func() {
		if !keep && w != nil {
			w.stop()
			w = nil
		}
		p.slots <- w
	}()
	for fresh := w == nil; ; fresh = true {
		if w == nil {
			var err error
			if w, err = start(p.opt.command, p.opt.env); err != nil {
				return nil, err
			}
		}
		w.said.forget()
		go func(w *process) {
			// A failure to write shows as the end of the worker's messages.
			_ = writeMessage(w.in, message{Kind: kindJob, Body: job})
		}(w)
		body, started, err := p.await(ctx, w, name, sign)
		if err == nil {
			keep = true
			return body, nil
		}
		je, ok := err.(*JobError)
		keep = ok && je.Cause == Refused
		if !ok || je.Cause != Crashed || started {
			return nil, err
		}
		if fresh {
			return nil, fmt.Errorf("a worker process cannot be started: it %s", je.Detail)
		}
		// It seems to have died while it was waiting for work: ask another.
		w.stop()
		w = nil
	}
}

// await follows one job to its end. started reports whether anything was heard of the
// worker since.
func (p *Pool) await(ctx context.Context, w *process, name string, sign func(string)) (body []byte, started bool, err error) {
	begun := time.Now()
	limit := p.opt.Limit
	allowed := p.opt.Silence
	heard := begun
	timer := time.NewTimer(min(allowed, limit))
	defer timer.Stop()
	for {
		select {
		case <-ctx.Done():
			return nil, started, ctx.Err()
		case m, ok := <-w.messages:
			if !ok {
				cause, detail := w.death()
				return nil, started, &JobError{name, cause, detail}
			}
			now := time.Now()
			started = true
			switch m.Kind {
			case kindDone:
				return m.Body, true, nil
			case kindFailed:
				return nil, true, &JobError{name, Refused, m.Text}
			case kindSign:
				if sign != nil {
					sign(m.Text)
				}
			}
			// Time granted for preparing something is not the paper's own.
			if grace := allowed - p.opt.Silence; grace > 0 {
				limit += min(now.Sub(heard), grace)
			}
			heard, allowed = now, p.opt.Silence+m.Grace
			timer.Reset(max(0, min(allowed, limit-now.Sub(begun)+m.Grace)))
		case <-timer.C:
			if time.Since(heard) >= allowed {
				return nil, started, &JobError{name, Silent, fmt.Sprintf("gave no sign of life for %s", allowed)}
			}
			return nil, started, &JobError{name, TooLong, fmt.Sprintf("was not done within %s", limit)}
		}
	}
}

// Close ends all workers. It is called once no job is running.
func (p *Pool) Close() {
	for range p.opt.Workers {
		if w := <-p.slots; w != nil {
			w.stop()
		}
	}
}
