package review

import (
	"fmt"
	"io"
	"path"
	"slices"
	"strings"

	"halfspan/report/ledger"
)

// Cautions is what stands under every table of results.
const Cautions = "A converted SD is an estimate under stated assumptions: have a second person check it against the page, and use it under your review's protocol and your own judgement."

// Unread is a file with what is to be said of it.
type Unread struct {
	Name, Reason string
}

// Summary is what a scan says at its end.
type Summary struct {
	Read       int      // papers read, the unchanged ones included
	Unchanged  int      // of these, taken from the ledger as they were
	Pages      int      // of the papers read
	Unread     []Unread // papers that could not be read at all
	Partly     []Unread // papers of which something could not be read
	Same       []Unread // files with the content of another
	Pictures   []Unread // tables that are only pictures
	Notes      []Unread // what else the readers had to say
	PassedOver []string // files that are no papers by their type
	All        bool     // write every line; otherwise long lists are cut, and their rest counted

	results  int
	readings map[string]int
	uses     map[string]int
	states   map[ledger.State]int
	gone     int
}

// AddPaper counts a paper that was read, or was not.
func (s *Summary) AddPaper(p *ledger.Paper) {
	if p.Failure != "" {
		s.Unread = append(s.Unread, Unread{p.Name, p.Failure})
		return
	}
	s.Read++
	s.Pages += p.Pages
	for _, problem := range p.Problems {
		u := Unread{p.Name, problem.Text}
		if problem.Page > 0 && !strings.Contains(strings.ToLower(problem.Text), fmt.Sprintf("page %d", problem.Page)) {
			u.Reason = fmt.Sprintf("page %d: %s", problem.Page, problem.Text)
		}
		switch {
		case problem.Kind == "picture-table":
			s.Pictures = append(s.Pictures, u)
		case problem.Lost:
			s.Partly = append(s.Partly, u)
		default:
			s.Notes = append(s.Notes, u)
		}
	}
}

// AddRow counts a result.
func (s *Summary) AddRow(r *ledger.Row) {
	if s.readings == nil {
		s.readings, s.uses, s.states = map[string]int{}, map[string]int{}, map[ledger.State]int{}
	}
	s.results++
	s.readings[r.Working.Record.Reading]++
	s.uses[r.Working.Record.Use]++
	s.states[r.State]++
	if r.Gone != "" {
		s.gone++
	}
}

// Trouble lists the papers that could not be read whole.
func (s *Summary) Trouble() []Unread {
	return append(slices.Clone(s.Unread), s.Partly...)
}

// Write writes the summary. What could not be read is only counted: see Trouble.
func (s *Summary) Write(w io.Writer) error {
	var b strings.Builder
	read := fmt.Sprintf("Read %s", Count(s.Read, "paper"))
	if s.Pages > 0 {
		read += fmt.Sprintf(" (%s of PDF)", Count(s.Pages, "page"))
	}
	if s.Unchanged > 0 {
		read += fmt.Sprintf(", %d unchanged since the last scan", s.Unchanged)
	}
	fmt.Fprintf(&b, "\n%s.\n", read)
	s.writeResults(&b)
	if n := len(s.Trouble()); n > 0 {
		fmt.Fprintf(&b, "Not read, or not whole: %s, named on standard error with the reasons.\n", filesOf(s.Trouble()))
	}
	s.list(&b, "Tables that are only pictures", s.Pictures)
	s.list(&b, "Read once only", s.Same)
	s.list(&b, "Notes on reading", s.Notes)
	if len(s.PassedOver) > 0 {
		fmt.Fprintf(&b, "Passed over %s: %s.\n", Count(len(s.PassedOver), "file"), byType(s.PassedOver))
	}
	fmt.Fprintf(&b, "%s\n", Cautions)
	_, err := io.WriteString(w, b.String())
	return err
}

func (s *Summary) writeResults(b *strings.Builder) {
	if s.results == 0 {
		fmt.Fprintln(b, "No result with an interval or a spread was found.")
		return
	}
	fmt.Fprintf(b, "Found %s. Reading: %d clear, %d look, %d doubtful. SD: %d printed, %d converted, %d withheld.\n",
		Count(s.results, "result"), s.readings["clear"], s.readings["look"], s.readings["doubtful"],
		s.uses["printed"], s.uses["converted"], s.uses["withheld"])
	if s.states[ledger.StateOpen] == s.results {
		return
	}
	var parts []string
	for _, state := range ledger.States() {
		if n := s.states[state]; n > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", n, state))
		}
	}
	fmt.Fprintf(b, "Decisions: %s.\n", strings.Join(parts, ", "))
	if s.gone > 0 {
		fmt.Fprintf(b, "No longer found, with their decisions kept: %s.\n", Count(s.gone, "decided result"))
	}
}

// filesOf counts the files that are spoken of.
func filesOf(all []Unread) string {
	names := map[string]bool{}
	for _, u := range all {
		names[u.Name] = true
	}
	return Count(len(names), "paper")
}

// mostLines is how many lines of one list are written.
const mostLines = 12

func (s *Summary) list(b *strings.Builder, title string, files []Unread) {
	if len(files) == 0 {
		return
	}
	fmt.Fprintf(b, "%s:\n", title)
	for i, u := range files {
		if i == mostLines && !s.All {
			fmt.Fprintf(b, "  and %d more; --notes lists all\n", len(files)-i)
			break
		}
		fmt.Fprintf(b, "  %s: %s\n", oneLine(u.Name), oneLine(u.Reason))
	}
}

// byType lists files by their endings: "2 .docx (a.docx, b.docx)".
func byType(names []string) string {
	byEnding := map[string][]string{}
	var endings []string
	for _, name := range names {
		ending := strings.ToLower(path.Ext(name))
		if byEnding[ending] == nil {
			endings = append(endings, ending)
		}
		byEnding[ending] = append(byEnding[ending], oneLine(name))
	}
	slices.Sort(endings)
	parts := make([]string, 0, len(endings))
	for _, ending := range endings {
		files := byEnding[ending]
		parts = append(parts, fmt.Sprintf("%d %s (%s)", len(files), or(ending, "without ending"), strings.Join(files, ", ")))
	}
	return strings.Join(parts, "; ")
}
