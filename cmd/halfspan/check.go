package main

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"strings"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"halfspan/report/ledger"
	"halfspan/report/review"
)

func newCheck(s *streams) *cobra.Command {
	var flags ledgerFlags
	var filter review.Filter
	var order string
	cmd := &cobra.Command{
		Use:   "check [PATH]",
		Short: "go through the open results in the terminal and decide",
		Long: `Go through the results that are open, queried or read differently since: see each
in its context with what was read and how the SD was reached, and decide with a
single key. Every decision is on disk before the next result is shown.

  c confirm   a amend   d drop   q query   s skip   b back   u undo   x quit

The doubtful come first. 'halfspan desk' does the same in the browser, beside the
page. ` + cautionsHelp,
		Example: `  halfspan check papers --checker AB
  halfspan check --order paper --paper winter
  halfspan check --state confirmed,amended     look again at what was decided`,
		Args: cobra.MaximumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if !slices.Contains(review.Orders(), order) {
				return usageError("--order: %q is none of: %s", order, strings.Join(review.Orders(), ", "))
			}
			if err := filter.Check(); err != nil {
				return usageError("%v", err)
			}
			if filter.State == "" {
				filter.State = "open,queried," + string(ledger.StateDiffering)
			}
			return check(cmd.Context(), s, args, &flags, &filter, order)
		},
	}
	flags.add(cmd)
	addFilter(cmd, &filter)
	cmd.Flags().StringVar(&order, "order", "doubt", "doubt (the doubtful first) or paper")
	complete(cmd, "order", review.Orders())
	return cmd
}

func check(ctx context.Context, s *streams, args []string, flags *ledgerFlags, filter *review.Filter, order string) error {
	keys := newKeys(ctx, s)
	var ask func() (string, error)
	if isTerminal(s.in) {
		ask = func() (string, error) {
			line, err := keys.Line("Who is checking? Initials: ")
			if err != nil {
				return "", fmt.Errorf("asking for initials: %w", err)
			}
			return ledger.Initials(line)
		}
	}
	book, err := flags.decide(args, ask)
	if err != nil {
		return err
	}
	defer book.Close()
	if err := book.Decisions().Writable(); err != nil {
		return err
	}
	all, err := book.Rows()
	if err != nil {
		return err
	}
	rows := filter.Apply(all)
	if len(rows) == 0 {
		fmt.Fprintf(s.out, "Nothing to check: none of %s is picked.\n", review.Count(len(all), "result"))
		return nil
	}
	session := review.Session{
		Book: book, In: keys, Out: s.out, Width: min(terminalWidth(s.out), 100), Order: order,
		Colour: isTerminal(s.out) && os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb",
	}
	return session.Run(rows)
}

// keys reads single keys from a terminal, or characters from a pipe, where line
// ends and spaces between keys do not count.
type keys struct {
	ctx      context.Context
	in       *bufio.Reader
	out      io.Writer
	terminal *os.File // nil for a pipe
	keyed    bool     // a pipe's last key may still be followed by its line end
}

func newKeys(ctx context.Context, s *streams) *keys {
	k := &keys{ctx: ctx, in: bufio.NewReader(s.in), out: s.out}
	if isTerminal(s.in) {
		k.terminal = s.in.(*os.File)
	}
	return k
}

// Key waits for one key. In a terminal it need not be followed by Enter.
func (k *keys) Key() (rune, error) {
	if k.terminal != nil {
		// Where the terminal cannot be switched, keys come line by line.
		if before, err := term.MakeRaw(int(k.terminal.Fd())); err == nil {
			defer term.Restore(int(k.terminal.Fd()), before)
		}
	}
	for {
		r, err := until(k.ctx, func() (rune, error) {
			r, _, err := k.in.ReadRune()
			return r, err
		})
		switch {
		case err != nil:
			return 0, err
		case r == 0x03, r == 0x04: // Ctrl-C, Ctrl-D
			return 0, io.EOF
		case r > ' ':
			k.keyed = k.terminal == nil
			return r, nil
		}
	}
}

// Line asks for a line of text.
func (k *keys) Line(prompt string) (string, error) {
	fmt.Fprint(k.out, prompt)
	read := func() (string, error) { return k.in.ReadString('\n') }
	line, err := until(k.ctx, read)
	if k.keyed && err == nil && strings.TrimRight(line, "\r\n") == "" {
		line, err = until(k.ctx, read)
	}
	k.keyed = false
	if errors.Is(err, io.EOF) && line != "" {
		err = nil
	}
	if k.terminal == nil {
		fmt.Fprintln(k.out, strings.TrimRight(line, "\r\n"))
	}
	return strings.TrimRight(line, "\r\n"), err
}

// until waits for a read, or for ctx to end, which counts as the end of the
// input: a read from a terminal cannot be called off, so it is left behind.
func until[T any](ctx context.Context, read func() (T, error)) (T, error) {
	type outcome struct {
		value T
		err   error
	}
	done := make(chan outcome, 1)
	go func() {
		v, err := read()
		done <- outcome{v, err}
	}()
	select {
	case o := <-done:
		return o.value, o.err
	case <-ctx.Done():
		var none T
		return none, io.EOF
	}
}
