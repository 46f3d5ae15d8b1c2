package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"runtime"
	"sync"

	"halfspan/extract/worker"
)

// answer is what became of one job.
type answer struct {
	body []byte
	err  error // a *worker.JobError where only this paper failed
}

// watcher hears how the jobs go on. It may be called from several goroutines.
type watcher interface {
	begun(name string)
	sign(name, text string)
	ended(name string)
}

// runInOrder runs jobs in worker processes, several at once, and hands their
// answers to each in the order of the jobs, so that what is kept and printed does
// not depend on which is done first. An error of each, or one that concerns more
// than one paper, ends it all.
func runInOrder(ctx context.Context, pool *worker.Pool, jobs []job, watch watcher, each func(i int, a answer) error) error {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	answers := make([]chan answer, len(jobs))
	for i := range answers {
		answers[i] = make(chan answer, 1)
	}
	next := make(chan int)
	var running sync.WaitGroup
	for range min(len(jobs), runtime.NumCPU()) {
		running.Add(1)
		go func() {
			defer running.Done()
			for i := range next {
				answers[i] <- runJob(ctx, pool, &jobs[i], watch)
			}
		}()
	}
	go func() {
		defer close(next)
		for i := range jobs {
			select {
			case next <- i:
			case <-ctx.Done():
				return
			}
		}
	}()
	defer running.Wait()
	defer cancel()
	for i := range jobs {
		select {
		case a := <-answers[i]:
			var je *worker.JobError
			if a.err != nil && !errors.As(a.err, &je) {
				return a.err
			}
			if err := each(i, a); err != nil {
				return err
			}
		case <-ctx.Done():
			return ctx.Err()
		}
	}
	return nil
}

func runJob(ctx context.Context, pool *worker.Pool, j *job, watch watcher) answer {
	request, err := json.Marshal(j)
	if err != nil {
		return answer{err: fmt.Errorf("asking for %s: %w", j.Name, err)}
	}
	watch.begun(j.Name)
	defer watch.ended(j.Name)
	body, err := pool.Do(ctx, j.Name, request, func(text string) { watch.sign(j.Name, text) })
	return answer{body, err}
}
