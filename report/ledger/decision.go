package ledger

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"reflect"
	"slices"
	"strings"
	"time"

	"halfspan/convert/working"
	"halfspan/extract/result"
)

// Verdict is what a checker decides about one result.
type Verdict string

// The verdicts. Undone takes the decision before it back.
const (
	Confirmed Verdict = "confirmed"
	Amended   Verdict = "amended"
	Dropped   Verdict = "dropped"
	Queried   Verdict = "queried"
	Undone    Verdict = "undone"
)

// State is how a result stands: its verdict, or one of the two below.
type State string

// The states that are no verdicts.
const (
	StateOpen      State = "open"
	StateDiffering State = "read differently since" // decided, but this version reads the place otherwise
)

// States lists all states, in the order in which they are shown.
func States() []State {
	return []State{StateOpen, State(Confirmed), State(Amended), State(Dropped), State(Queried), StateDiffering}
}

// ReasonOther is the reason that says nothing without a note.
const ReasonOther = "other"

// Reasons lists the reasons that amended and dropped results carry.
func Reasons() []string {
	return []string{"misread", "wrong arm or time", "misprint in the paper", "not needed", "printed twice", ReasonOther}
}

// Sources lists where a result added by hand may come from.
func Sources() []string {
	return []string{"table", "text", "figure", "supplement", "author's reply"}
}

// Decision is one entry of a checker's ledger.
type Decision struct {
	Seq        int64
	At         time.Time // UTC, whole seconds
	Checker    string
	Verdict    Verdict
	Undoes     int64 // of Undone: the decision taken back
	Reason     string
	Note       string
	Mode       string            // where and how it was taken: "terminal", "sheet", "desk", ...
	Extra      map[string]string // whatever the front end wants kept with it
	ByHand     string            // where a result added by a person was found; empty for the program's own
	Version    string            // of the program
	ResultID   string
	Anchor     result.Anchor
	Seen       Item   // as it was seen, whole
	SeenSHA256 string // of its record, see [Hash]
	Decided    Item   // as decided; equal to Seen but for amended
}

// Hash is the SHA-256 of what a person sees of a record, in hexadecimal. Where
// the paper's file lies, what the result is called and the boxes that are drawn
// do not count.
func Hash(r working.Record) string {
	r.ID, r.Paper, r.Mates, r.Places = "", "", nil, nil
	text, err := json.Marshal(r)
	if err != nil {
		// A record is made of strings and numbers; only an infinite number could
		// fail, and those are kept out of records.
		text = fmt.Appendf(nil, "%+v", r)
	}
	sum := sha256.Sum256(text)
	return hex.EncodeToString(sum[:])
}

// matters names the fields of a record that make two readings of one place the
// same or not. Where it was found, how sure the program is and what it flags may
// change from version to version without a new decision.
var matters = []string{"statistic", "measure", "given_as", "estimate", "lower", "upper", "given_value", "level", "n", "n2",
	"arm", "arm2", "time", "subgroup", "outcome", "unit", "adjusted", "mean", "sd", "sd_of", "se", "scale", "use"}

// Differs names the fields in which two readings of one place differ and that
// matter, in the record's order.
func Differs(a, b working.Record) []string {
	var names []string
	va, vb := reflect.ValueOf(a), reflect.ValueOf(b)
	for i := range va.NumField() {
		name, _, _ := strings.Cut(va.Type().Field(i).Tag.Get("json"), ",")
		if slices.Contains(matters, name) && fieldText(va.Field(i)) != fieldText(vb.Field(i)) {
			names = append(names, name)
		}
	}
	return names
}

// fieldText is a record's field as it is written out: numbers with 9
// significant digits, so that machines agree.
func fieldText(v reflect.Value) string {
	text, err := json.Marshal(v.Interface())
	if err != nil {
		return fmt.Sprint(v.Interface())
	}
	return string(text)
}

// checkDraft refuses decisions that are not complete.
func checkDraft(d *Draft, seen working.Record) error {
	switch d.Verdict {
	case Confirmed, Queried, Dropped, Amended:
	default:
		return fmt.Errorf("%q is no verdict", d.Verdict)
	}
	needsReason := d.Verdict == Dropped || d.Verdict == Amended
	if needsReason && !slices.Contains(Reasons(), d.Reason) {
		if d.Reason == "" {
			return fmt.Errorf("%w: %s", ErrReason, strings.Join(Reasons(), ", "))
		}
		return fmt.Errorf("%w: %q is none of %s", ErrReason, d.Reason, strings.Join(Reasons(), ", "))
	}
	if d.Reason == ReasonOther && strings.TrimSpace(d.Note) == "" {
		return fmt.Errorf("%w: say in words what the other reason is", ErrReason)
	}
	if d.Verdict == Queried && d.Reason == "" && strings.TrimSpace(d.Note) == "" {
		return fmt.Errorf("%w: say what is in question", ErrReason)
	}
	if d.Verdict == Amended {
		if d.Amended == nil || len(Differs(seen, d.Amended.Working.Record)) == 0 {
			return ErrUnchanged
		}
	}
	return nil
}
