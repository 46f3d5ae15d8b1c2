package main

import (
	"fmt"
	"io"
	"os"
	"strings"
	"sync"
	"time"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"
)

// isTerminal tells whether a stream is a terminal that a person looks at.
func isTerminal(stream any) bool {
	f, ok := stream.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

// terminalWidth is the number of columns to write for.
func terminalWidth(stream any) int {
	if f, ok := stream.(*os.File); ok {
		if width, _, err := term.GetSize(int(f.Fd())); err == nil && width > 0 {
			return width
		}
	}
	return 80
}

// silent is the watcher where nobody watches.
type silent struct{}

func (silent) begun(string)        {}
func (silent) sign(string, string) {}
func (silent) ended(string)        {}

// progress shows how far the papers are, on a terminal.
type progress struct {
	mu      sync.Mutex
	bar     *progressbar.ProgressBar
	total   int
	done    int
	running []string // names, oldest first
}

// newWatcher gives a progress bar on a terminal and silence elsewhere, and the
// function that takes the bar away.
func newWatcher(w io.Writer, total int) (watcher, func()) {
	if !isTerminal(w) || total == 0 {
		return silent{}, func() {}
	}
	p := &progress{total: total}
	p.bar = progressbar.NewOptions(total,
		progressbar.OptionSetWriter(w), progressbar.OptionSetWidth(16), progressbar.OptionClearOnFinish(),
		progressbar.OptionThrottle(50*time.Millisecond), progressbar.OptionSetPredictTime(false),
		progressbar.OptionSetElapsedTime(false), progressbar.OptionShowDescriptionAtLineEnd(),
		progressbar.OptionUseANSICodes(os.Getenv("TERM") != "dumb"))
	// Failing to draw a bar is no reason to stop reading.
	return p, func() { _ = p.bar.Finish(); _ = p.bar.Clear() }
}

func (p *progress) begun(name string) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.running = append(p.running, name)
	p.describe("")
}

func (p *progress) sign(name, text string) {
	p.mu.Lock()
	defer p.mu.Unlock()
	if len(p.running) > 0 && p.running[0] == name {
		p.describe(text)
	}
}

func (p *progress) ended(name string) {
	p.mu.Lock()
	defer p.mu.Unlock()
	for i, n := range p.running {
		if n == name {
			p.running = append(p.running[:i], p.running[i+1:]...)
			break
		}
	}
	p.done++
	_ = p.bar.Set(p.done)
	p.describe("")
}

// describe says what is left and what is being read: the paper that has been
// longest at it.
func (p *progress) describe(text string) {
	line := fmt.Sprintf("%d read, %d left", p.done, p.total-p.done)
	if len(p.running) > 0 {
		line += ": " + shorten(p.running[0], 36)
		if text != "" {
			line += " (" + text + ")"
		}
	}
	p.bar.Describe(line)
}

// shorten cuts the beginning of a long name: the end tells papers apart.
func shorten(name string, width int) string {
	runes := []rune(strings.Map(func(r rune) rune {
		if r < ' ' {
			return '?'
		}
		return r
	}, name))
	if len(runes) <= width {
		return string(runes)
	}
	return "…" + string(runes[len(runes)-width+1:])
}
