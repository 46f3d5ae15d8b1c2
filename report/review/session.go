package review

import (
	"cmp"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"

	"halfspan/convert/working"
	"halfspan/report/ledger"
)

// Input is where the keys of a checking session come from: a terminal, or a pipe.
type Input interface {
	// Key waits for one key. io.EOF means that no more come.
	Key() (rune, error)
	// Line asks for a line of text.
	Line(prompt string) (string, error)
}

// Session is a checking session in the terminal. Every decision is on disk
// before the next result is shown.
type Session struct {
	Book   *ledger.Book
	In     Input
	Out    io.Writer
	Width  int
	Colour bool
	Order  string // one of [Orders]

	rows  []ledger.Row
	at    int
	shown string   // what stands on the screen
	taken []string // ids of the results decided in this session, for undo
	count map[ledger.Verdict]int
}

// Orders lists the orders in which results can be gone through.
func Orders() []string { return []string{"doubt", "paper"} }

// mode is noted with every decision taken here.
const mode = "terminal"

// errQuit ends a session.
var errQuit = errors.New("quit")

const keysHelp = `c confirm  a amend  d drop  q query  s skip  b back  u undo  x quit  h help`

const keysLong = `  c  confirm: what was read is what the paper says
  a  amend: put single fields right; the SD is worked out anew
  d  drop, with a reason: it will not be exported
  q  query, with what is in question: it stays on the list
  s  skip: decide later
  b  back to the result before
  u  undo the last decision of this session
  x  quit: everything decided is kept`

// Run goes through the rows until the person quits or all are passed, and says
// how many were decided.
func (s *Session) Run(rows []ledger.Row) error {
	s.rows, s.count = slices.Clone(rows), map[ledger.Verdict]int{}
	if s.Order != "paper" {
		slices.SortStableFunc(s.rows, func(a, b ledger.Row) int { return cmp.Compare(doubt(&a), doubt(&b)) })
	}
	fmt.Fprintln(s.Out, keysHelp)
	for s.at < len(s.rows) {
		err := s.step()
		if errors.Is(err, errQuit) || errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return err
		}
	}
	s.end()
	return nil
}

// doubt orders rows by how much they need to be looked at.
func doubt(r *ledger.Row) int {
	if r.State == ledger.StateDiffering {
		return 0
	}
	return 1 + max(0, slices.Index([]string{"doubtful", "look", "clear"}, r.Working.Record.Reading))
}

func (s *Session) end() {
	var parts []string
	for _, v := range []ledger.Verdict{ledger.Confirmed, ledger.Amended, ledger.Dropped, ledger.Queried, ledger.Undone} {
		if n := s.count[v]; n > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", n, v))
		}
	}
	text := "Nothing decided"
	if len(parts) > 0 {
		text = strings.Join(parts, ", ")
	}
	fmt.Fprintf(s.Out, "\n%s; kept in %s.\n", text, s.Book.Decisions().Path())
}

// step shows one result and does what the next key says.
func (s *Session) step() error {
	row := &s.rows[s.at]
	if shown := row.ID() + row.Token(); shown != s.shown {
		s.shown = shown
		fmt.Fprintf(s.Out, "\n%d of %d  %s\n", s.at+1, len(s.rows), row.ID())
		c := card{s.Out, s.Width, s.Colour}
		c.show(row)
	}
	for {
		fmt.Fprint(s.Out, "> ")
		key, err := s.In.Key()
		if err != nil {
			return err
		}
		fmt.Fprintf(s.Out, "%c\n", key)
		switch key {
		case 'c':
			return s.decide(ledger.Draft{Verdict: ledger.Confirmed})
		case 'a':
			return s.amend()
		case 'd':
			return s.withReason(ledger.Draft{Verdict: ledger.Dropped})
		case 'q':
			note, err := s.In.Line("what is in question? ")
			if err != nil {
				return err
			}
			return s.decide(ledger.Draft{Verdict: ledger.Queried, Note: note})
		case 's':
			s.at++
			return nil
		case 'b':
			s.at = max(0, s.at-1)
			return nil
		case 'u':
			return s.undo()
		case 'x':
			return errQuit
		case 'h', '?':
			fmt.Fprintln(s.Out, keysLong)
		default:
			fmt.Fprintln(s.Out, keysHelp)
		}
	}
}

// decide takes the decision about the row in sight and goes on to the next. A
// refusal is said, and the row shown again.
func (s *Session) decide(d ledger.Draft) error {
	row := &s.rows[s.at]
	d.ID, d.Token, d.Mode = row.ID(), row.Token(), mode
	now, err := s.Book.Decide(d)
	var de *ledger.DraftError
	if errors.As(err, &de) {
		fmt.Fprintf(s.Out, "not taken: %v\n", de.Err)
		return s.reload()
	}
	if err != nil {
		return err
	}
	s.rows[s.at] = now[0]
	s.taken = append(s.taken, d.ID)
	s.count[d.Verdict]++
	fmt.Fprintf(s.Out, "%s\n", d.Verdict)
	s.at++
	return nil
}

// reload takes up what has become of the row in sight meanwhile.
func (s *Session) reload() error {
	row, err := s.Book.Row(s.rows[s.at].ID())
	if errors.Is(err, ledger.ErrUnknown) {
		fmt.Fprintln(s.Out, "it is no longer there")
		s.at++
		return nil
	}
	if err == nil {
		s.rows[s.at] = row
	}
	return err
}

func (s *Session) undo() error {
	if len(s.taken) == 0 {
		fmt.Fprintln(s.Out, "nothing was decided in this session")
		return nil
	}
	id := s.taken[len(s.taken)-1]
	i := slices.IndexFunc(s.rows, func(r ledger.Row) bool { return r.ID() == id })
	s.at = i
	now, err := s.Book.Undo(id, s.rows[i].Token(), mode)
	if errors.Is(err, ledger.ErrStale) || errors.Is(err, ledger.ErrNothing) {
		fmt.Fprintf(s.Out, "not undone: %v\n", err)
		s.taken = s.taken[:len(s.taken)-1]
		return s.reload()
	}
	if err != nil {
		return err
	}
	s.taken = s.taken[:len(s.taken)-1]
	s.rows[i] = now
	s.count[ledger.Undone]++
	fmt.Fprintln(s.Out, "undone")
	return nil
}

// withReason asks for a reason and decides.
func (s *Session) withReason(d ledger.Draft) error {
	reasons := ledger.Reasons()
	for i, r := range reasons {
		fmt.Fprintf(s.Out, "  %d  %s\n", i+1, r)
	}
	fmt.Fprint(s.Out, "reason> ")
	key, err := s.In.Key()
	if err != nil {
		return err
	}
	fmt.Fprintf(s.Out, "%c\n", key)
	i := int(key - '1')
	if i < 0 || i >= len(reasons) {
		fmt.Fprintln(s.Out, "not taken: that is none of the reasons")
		return nil
	}
	d.Reason = reasons[i]
	if d.Reason == ledger.ReasonOther {
		if d.Note, err = s.In.Line("in words: "); err != nil {
			return err
		}
	}
	return s.decide(d)
}

// amend asks for fields and their values, shows what comes of each, and takes the
// decision with a reason.
func (s *Session) amend() error {
	row := &s.rows[s.at]
	base := row.Item
	changed := map[string]string{}
	take := ""
	fmt.Fprintf(s.Out, "fields: %s\n", strings.Join(working.Amendable(), ", "))
	if len(base.Working.Trail.Alternatives) > 0 {
		fmt.Fprintln(s.Out, "'take' and the name of a proposal takes its mean and SD")
	}
	var now *ledger.Item
	for {
		line, err := s.In.Line("field and value (empty: done)> ")
		if err != nil {
			return err
		}
		field, value, _ := strings.Cut(strings.TrimSpace(line), " ")
		if field == "" {
			break
		}
		value = strings.TrimSpace(value)
		before, had := changed[field]
		takeBefore := take
		if field == "take" {
			take = value
		} else {
			changed[strings.TrimSuffix(field, "=")] = value
		}
		item, err := Amend(&base, changed, take)
		if err != nil {
			fmt.Fprintf(s.Out, "not taken: %v\n", err)
			delete(changed, field)
			if had {
				changed[field] = before
			}
			take = takeBefore
			continue
		}
		now = item
		s.changes(&base, now)
	}
	if now == nil {
		fmt.Fprintln(s.Out, "nothing was amended")
		return nil
	}
	return s.withReason(ledger.Draft{Verdict: ledger.Amended, Amended: now})
}

// changes shows what differs after amending.
func (s *Session) changes(before, after *ledger.Item) {
	for _, name := range ledger.Differs(before.Working.Record, after.Working.Record) {
		old, _ := Field(&before.Working.Record, name)
		now, _ := Field(&after.Working.Record, name)
		fmt.Fprintf(s.Out, "  %-12s %s → %s\n", name, or(old, "-"), or(now, "-"))
	}
	if r := &after.Working.Record; r.Use == "withheld" && r.Reason != "" {
		fmt.Fprintf(s.Out, "  SD withheld: %s\n", r.Reason)
	}
}

// Amend works an item through again with the fields that a person put right, and
// the proposal that the person takes, if any.
func Amend(item *ledger.Item, changed map[string]string, take string) (*ledger.Item, error) {
	result, w, err := working.Amend(item.Result, item.Working, changed, take)
	if err != nil {
		return nil, err
	}
	return &ledger.Item{Result: result, Working: w}, nil
}
