package worker

import (
	"bufio"
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
	"sync"
	"testing"
	"time"
)

func TestMain(m *testing.M) {
	Serve(testJob)
	os.Exit(m.Run())
}

// hold keeps what a test job allocates from being collected.
var hold [][]byte

// testJob does what the first word of the job says.
func testJob(job []byte, alive Alive) ([]byte, error) {
	word, rest, _ := strings.Cut(string(job), " ")
	switch word {
	case "echo":
		alive("page 1", 0)
		return []byte(rest), nil
	case "long":
		return bytes.Repeat([]byte(rest), 1<<20), nil
	case "refuse":
		return nil, errors.New(rest)
	case "print":
		fmt.Println("a library prints this")
		return []byte("printed"), nil
	case "spin":
		//lint:ignore SA5002 this is what is to be caught
		for {
		}
	case "tick":
		for {
			alive("still here", 0)
			time.Sleep(20 * time.Millisecond)
		}
	case "prepare":
		alive("preparing", 5*time.Second)
		time.Sleep(1300 * time.Millisecond)
		alive("page 1", 0)
		return []byte("prepared"), nil
	case "eat":
		for {
			hold = append(hold, bytes.Repeat([]byte{1}, 8<<20))
			alive("eating", 0)
			time.Sleep(time.Millisecond)
		}
	case "panic":
		panic("bees in the hive")
	case "overflow":
		var f func([1024]int) int // large frames: the runtime counts them all before it dies
		f = func(a [1024]int) int { a[a[0]%1024]++; return f(a) + a[1] }
		return nil, fmt.Errorf("%d", f([1024]int{}))
	case "leave":
		os.Exit(5)
	case "pid":
		return fmt.Appendf(nil, "%d", os.Getpid()), nil
	}
	return nil, fmt.Errorf("no such job: %s", word)
}

func newTestPool(t *testing.T, opt Options) *Pool {
	t.Helper()
	p := NewPool(opt)
	t.Cleanup(p.Close)
	return p
}

func TestDo(t *testing.T) {
	// Starting a worker on a machine that is busy takes a while: only those who
	// are to be caught have little time.
	patient := newTestPool(t, Options{Workers: 1})
	strict := newTestPool(t, Options{Workers: 1, Silence: time.Second, Limit: 2 * time.Second})
	for _, test := range []struct {
		job    string
		want   string
		cause  Cause
		detail string
		strict bool
	}{
		{job: "echo 3.1 kg", want: "3.1 kg"},
		{job: "echo ", want: ""},
		{job: "print", want: "printed"},
		{job: "refuse not a paper", cause: Refused, detail: "not a paper"},
		{job: "spin", cause: Silent, detail: "no sign of life for 1s", strict: true},
		{job: "tick", cause: TooLong, detail: "not done within 2s", strict: true},
		{job: "prepare", want: "prepared", strict: true},
		{job: "panic", cause: Crashed, detail: "bees in the hive"},
		{job: "overflow", cause: Crashed, detail: "stack overflow"},
		{job: "leave", cause: Crashed, detail: "exit status 5"},
		{job: "echo again", want: "again"},
	} {
		t.Run(test.job, func(t *testing.T) {
			p := patient
			if test.strict {
				p = strict
			}
			got, err := p.Do(context.Background(), "hive.txt", []byte(test.job), nil)
			if test.cause == 0 {
				if err != nil || string(got) != test.want {
					t.Fatalf("got %q, %v; want %q", got, err, test.want)
				}
				return
			}
			var je *JobError
			if !errors.As(err, &je) || je.Cause != test.cause || !strings.Contains(je.Detail, test.detail) || je.Name != "hive.txt" {
				t.Fatalf("got %#v, want cause %d with %q", err, test.cause, test.detail)
			}
		})
	}
}

// TestAgain: after a worker was lost the job made of it runs; after a refusal none.
func TestAgain(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1, Again: func(job []byte) []byte { return append([]byte("echo "), job...) }})
	if got, err := p.Do(context.Background(), "hive.txt", []byte("leave"), nil); err != nil || string(got) != "leave" {
		t.Errorf("got %q, %v", got, err)
	}
	if _, err := p.Do(context.Background(), "hive.txt", []byte("refuse"), nil); err == nil {
		t.Error("a refusal was run again")
	}
}

func TestMemoryIsBounded(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1})
	_, err := p.Do(context.Background(), "hive.txt", []byte("eat"), nil)
	var je *JobError
	if !errors.As(err, &je) || je.Cause != Memory {
		t.Fatalf("got %v, want a memory error", err)
	}
}

func TestLongLines(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1})
	got, err := p.Do(context.Background(), "hive.txt", []byte("long 01234567"), nil)
	if err != nil || len(got) != 8<<20 {
		t.Fatalf("got %d bytes, %v", len(got), err)
	}
	job := "echo " + strings.Repeat("x", 4<<20)
	got, err = p.Do(context.Background(), "hive.txt", []byte(job), nil)
	if err != nil || len(got) != 4<<20 {
		t.Fatalf("got %d bytes, %v", len(got), err)
	}
}

func TestWorkersLiveLong(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1})
	pid := func() string {
		got, err := p.Do(context.Background(), "hive.txt", []byte("pid"), nil)
		if err != nil {
			t.Fatal(err)
		}
		return string(got)
	}
	first := pid()
	if again := pid(); again != first {
		t.Errorf("worker %s replaced by %s without need", first, again)
	}
	// A worker that dies while it waits is not the next job's fault.
	w := <-p.slots
	if err := w.cmd.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	p.slots <- w
	if again := pid(); again == first {
		t.Errorf("a dead worker answered")
	}
}

func TestSideBySide(t *testing.T) {
	p := newTestPool(t, Options{Workers: 2, Silence: 2 * time.Second})
	var wait sync.WaitGroup
	for i := range 20 {
		wait.Add(1)
		go func() {
			defer wait.Done()
			job := fmt.Sprintf("echo %d", i)
			if i == 7 {
				job = "spin"
			}
			got, err := p.Do(context.Background(), "hive.txt", []byte(job), nil)
			if want := fmt.Sprint(i); (err != nil || string(got) != want) != (i == 7) {
				t.Errorf("job %d: got %q, %v", i, got, err)
			}
		}()
	}
	wait.Wait()
}

func TestSigns(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1})
	var signs []string
	if _, err := p.Do(context.Background(), "hive.txt", []byte("echo x"), func(s string) { signs = append(signs, s) }); err != nil {
		t.Fatal(err)
	}
	if len(signs) != 1 || signs[0] != "page 1" {
		t.Errorf("got signs %q", signs)
	}
}

func TestCancelled(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1})
	ctx, cancel := context.WithTimeout(context.Background(), 50*time.Millisecond)
	defer cancel()
	if _, err := p.Do(ctx, "hive.txt", []byte("spin"), nil); !errors.Is(err, context.DeadlineExceeded) {
		t.Fatalf("got %v", err)
	}
}

func TestWorkerThatCannotStart(t *testing.T) {
	p := newTestPool(t, Options{Workers: 1, command: []string{os.Args[0], "-test.run=NONE"}})
	_, err := p.Do(context.Background(), "hive.txt", []byte("echo"), nil)
	var je *JobError
	if err == nil || errors.As(err, &je) || !strings.Contains(err.Error(), "cannot be started") {
		t.Fatalf("got %v", err)
	}
	p = newTestPool(t, Options{Workers: 1, command: []string{"/no/such/program"}})
	if _, err := p.Do(context.Background(), "hive.txt", []byte("echo"), nil); err == nil || errors.As(err, &je) {
		t.Fatalf("got %v", err)
	}
}

// TestEndOfInput: a worker leaves when its parent does, even in the middle of a
// job that never ends.
func TestEndOfInput(t *testing.T) {
	in, parent := io.Pipe()
	left := make(chan int, 1)
	go serve(func([]byte, Alive) ([]byte, error) { select {} }, in, io.Discard, func(status int) { left <- status })
	if err := writeMessage(parent, message{Kind: kindJob}); err != nil {
		t.Fatal(err)
	}
	parent.Close()
	select {
	case status := <-left:
		if status != 0 {
			t.Errorf("left with status %d", status)
		}
	case <-time.After(5 * time.Second):
		t.Fatal("still there")
	}
}

func TestReadMessage(t *testing.T) {
	for in, want := range map[string]string{
		"":                       "EOF",
		"{\"kind\":\"job\"}":     "unexpected EOF",
		"hello\n":                "not a message",
		"{\"kind\":\"ready\"}\n": "",
	} {
		_, err := readMessage(bufio.NewReader(strings.NewReader(in)))
		if (err == nil) != (want == "") || err != nil && !strings.Contains(err.Error(), want) {
			t.Errorf("%q: got %v, want %q", in, err, want)
		}
	}
}
