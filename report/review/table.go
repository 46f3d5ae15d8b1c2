package review

import (
	"fmt"
	"io"
	"regexp"
	"slices"
	"strings"

	"github.com/mattn/go-runewidth"
	"github.com/olekukonko/tablewriter"
	"github.com/olekukonko/tablewriter/renderer"
	"github.com/olekukonko/tablewriter/tw"

	"halfspan/report/ledger"
)

// TableOptions say how the review table is written.
type TableOptions struct {
	Width  int  // columns to fit into; 0: as wide as needed
	Colour bool // mark readings and states by colour as well as by word
}

// column is one column of the review table.
type column struct {
	title string
	value func(r *ledger.Row, ids shortIDs) string
	right bool // numbers stand under each other
	least int  // what it is cut to before another column is left out; 0: not cut for want of width
	most  int  // what it is cut to in any case; 0: never
	rank  int  // the highest rank is left out first where the width is short; 0: never
}

// columns are those of the table in the terminal. The paper stands above its
// rows.
func columns() []column {
	return []column{
		{title: "id", value: func(r *ledger.Row, ids shortIDs) string { return ids.of(r.ID()) }},
		{title: "page", right: true, rank: 3, value: func(r *ledger.Row, _ shortIDs) string {
			if p := r.Working.Record.Page; p != nil {
				return fmt.Sprint(*p)
			}
			return ""
		}},
		{title: "printed", most: 44, value: func(r *ledger.Row, _ shortIDs) string { return Printed(&r.Current().Working.Record) }},
		{title: "statistic", least: 6, most: 15, rank: 6, value: func(r *ledger.Row, _ shortIDs) string { return str(r.Current().Working.Record.Statistic) }},
		{title: "arm", least: 7, most: 24, rank: 2, value: func(r *ledger.Row, _ shortIDs) string { return Group(&r.Current().Working.Record) }},
		{title: "time", least: 6, most: 14, rank: 4, value: func(r *ledger.Row, _ shortIDs) string { return str(r.Current().Working.Record.Time) }},
		{title: "n", right: true, value: func(r *ledger.Row, _ shortIDs) string {
			return strings.ReplaceAll(Sizes(&r.Current().Working.Record), ", ", "/")
		}},
		{title: "SD", right: true, value: func(r *ledger.Row, _ shortIDs) string {
			// The scale of an SE goes with the statistic and stands in the card.
			spread, _, _ := strings.Cut(Spread(&r.Current().Working.Record), " l")
			return spread
		}},
		{title: "digits allow", rank: 5, value: func(r *ledger.Row, _ shortIDs) string { return DigitsAllow(&r.Current().Working.Record) }},
		{title: "reading", rank: 1, value: func(r *ledger.Row, _ shortIDs) string { return r.Working.Record.Reading }},
		{title: "flags", least: 12, most: 44, rank: 7, value: func(r *ledger.Row, _ shortIDs) string { return strings.Join(r.Working.Record.Flags, " ") }},
		{title: "state", least: 9, value: func(r *ledger.Row, _ shortIDs) string { return stateWord(r) }},
	}
}

// stateWord is the state with a word on a result that is not among those read.
func stateWord(r *ledger.Row) string {
	switch {
	case r.ByHand != "":
		return string(r.State) + ", added"
	case r.Gone != "":
		return string(r.State) + ", gone"
	}
	return string(r.State)
}

// goneNotes explains the word gone, under the table.
func goneNotes(rows []ledger.Row) []string {
	count := map[string]int{}
	var reasons []string
	for i := range rows {
		if why := rows[i].Gone; why != "" {
			if count[why] == 0 {
				reasons = append(reasons, why)
			}
			count[why]++
		}
	}
	slices.Sort(reasons)
	for i, why := range reasons {
		reasons[i] = fmt.Sprintf("gone: %s decided, and the decision is kept, but %s", Count(count[why], "result"), why)
	}
	return reasons
}

// shortIDs shortens ids to what tells them apart.
type shortIDs int

func shorten(rows []ledger.Row) shortIDs {
	for n := 5; n < 10; n++ {
		seen := map[string]bool{}
		clash := false
		for i := range rows {
			id := rows[i].ID()
			short := id[:min(n, len(id))]
			clash = clash || seen[short]
			seen[short] = true
		}
		if !clash {
			return shortIDs(n)
		}
	}
	return 10
}

func (n shortIDs) of(id string) string { return id[:min(int(n), len(id))] }

// gap is what parts two columns.
const gap = 2

// Table writes the review table: the results of each paper under its name, one
// a line, never wrapped. Where the width is short, columns that can be looked up
// elsewhere are left out, and long texts are cut with an ellipsis.
func Table(w io.Writer, rows []ledger.Row, opt TableOptions) error {
	if len(rows) == 0 {
		return nil
	}
	ids := shorten(rows)
	all := columns()
	cells := make([][]string, len(rows))
	for i := range rows {
		for _, c := range all {
			cells[i] = append(cells[i], oneLine(c.value(&rows[i], ids)))
		}
	}
	if !slices.ContainsFunc(rows, func(r ledger.Row) bool { return r.State != ledger.StateOpen }) {
		all[len(all)-1].rank = 8 // it would say the same in every line
	}
	widths := fit(all, cells, opt.Width)
	for start := 0; start < len(rows); {
		paper := rows[start].Working.Record.Paper
		end := start
		for end < len(rows) && rows[end].Working.Record.Paper == paper {
			end++
		}
		title := oneLine(paper)
		if opt.Width > 0 {
			title = runewidth.Truncate(title, opt.Width, "…")
		}
		if opt.Colour {
			title = "\x1b[1m" + title + "\x1b[0m"
		}
		if start > 0 {
			title = "\n" + title
		}
		if _, err := fmt.Fprintln(w, title); err != nil {
			return err
		}
		if err := tableOf(w, all, cells[start:end], rows[start:end], widths, opt.Colour); err != nil {
			return err
		}
		start = end
	}
	for i, note := range goneNotes(rows) {
		if i == 0 {
			note = "\n" + note
		}
		if _, err := fmt.Fprintln(w, note+"."); err != nil {
			return err
		}
	}
	return nil
}

// fit gives each column its width, 0 where it is left out.
func fit(all []column, cells [][]string, width int) []int {
	natural := make([]int, len(all))
	least := make([]int, len(all))
	for k, c := range all {
		empty := true
		for i := range cells {
			natural[k] = max(natural[k], runewidth.StringWidth(cells[i][k]))
			empty = empty && cells[i][k] == ""
		}
		if empty {
			continue
		}
		natural[k] = max(natural[k], len(c.title))
		if c.most > 0 {
			natural[k] = min(natural[k], c.most)
		}
		least[k] = natural[k]
		if c.least > 0 {
			least[k] = min(natural[k], max(c.least, len(c.title)))
		}
	}
	if width <= 0 {
		return natural
	}
	for need(least) > width {
		worst := -1
		for k, c := range all {
			if least[k] > 0 && c.rank > 0 && (worst < 0 || c.rank > all[worst].rank) {
				worst = k
			}
		}
		if worst < 0 {
			break
		}
		least[worst], natural[worst] = 0, 0
	}
	// What is left goes to the columns that were cut, a little to each in turn.
	spare := width - need(least)
	for given := true; given && spare > 0; {
		given = false
		for k := range least {
			if least[k] < natural[k] && spare > 0 {
				least[k]++
				spare--
				given = true
			}
		}
	}
	return least
}

func need(widths []int) int {
	total := -gap
	for _, w := range widths {
		if w > 0 {
			total += w + gap
		}
	}
	return total
}

// tableOf writes the rows of one paper.
func tableOf(w io.Writer, all []column, cells [][]string, rows []ledger.Row, widths []int, colour bool) error {
	var header []string
	var aligned []tw.Align
	for k, c := range all {
		if widths[k] == 0 {
			continue
		}
		align := tw.AlignLeft
		title := pad(c.title, widths[k], c.right)
		if c.right {
			align = tw.AlignRight
		}
		header, aligned = append(header, title), append(aligned, align)
	}
	var text strings.Builder
	table := plainTable(&text, aligned)
	table.Header(header)
	for i := range cells {
		var line []string
		for k, c := range all {
			if widths[k] == 0 {
				continue
			}
			text := runewidth.Truncate(cells[i][k], widths[k], "…")
			cell := pad(text, widths[k], c.right)
			if colour && text != "" {
				// The text alone: coloured spaces at the end of a line would stay there.
				cell = strings.Replace(cell, text, paint(c.title, text, &rows[i]), 1)
			}
			line = append(line, cell)
		}
		if err := table.Append(line); err != nil {
			return err
		}
	}
	if err := table.Render(); err != nil {
		return err
	}
	return writeTrimmed(w, text.String())
}

// pad fills a cell up, so that the tables of all papers line up.
func pad(s string, width int, right bool) string {
	if right {
		return runewidth.FillLeft(s, width)
	}
	return runewidth.FillRight(s, width)
}

// plainTable is a table without lines, two spaces between its columns.
func plainTable(w io.Writer, aligned []tw.Align) *tablewriter.Table {
	padding := tw.CellPadding{Global: tw.Padding{Right: "  ", Overwrite: true}}
	alignment := tw.CellAlignment{PerColumn: aligned}
	return tablewriter.NewTable(w,
		tablewriter.WithRenderer(renderer.NewBlueprint(tw.Rendition{
			Borders: tw.BorderNone,
			Settings: tw.Settings{
				Separators: tw.SeparatorsNone,
				Lines:      tw.Lines{ShowTop: tw.Off, ShowBottom: tw.Off, ShowHeaderLine: tw.Off, ShowFooterLine: tw.Off},
			},
		})),
		tablewriter.WithConfig(tablewriter.Config{
			Header:   tw.CellConfig{Formatting: tw.CellFormatting{AutoFormat: tw.Off, AutoWrap: tw.WrapNone}, Alignment: alignment, Padding: padding},
			Row:      tw.CellConfig{Formatting: tw.CellFormatting{AutoFormat: tw.Off, AutoWrap: tw.WrapNone}, Alignment: alignment, Padding: padding},
			Behavior: tw.Behavior{TrimSpace: tw.Off, TrimLine: tw.Off},
		}))
}

// needlessReset is the end of a colour that the table writer puts behind the
// padding of a cell: paint has ended it already.
var needlessReset = regexp.MustCompile(`( )\x1b\[0m`)

// writeTrimmed writes lines without the white space at their ends.
func writeTrimmed(w io.Writer, text string) error {
	for line := range strings.Lines(text) {
		line = needlessReset.ReplaceAllString(line, "$1")
		if _, err := fmt.Fprintln(w, strings.TrimRight(line, " \n")); err != nil {
			return err
		}
	}
	return nil
}

// paint colours what calls for attention. The word says the same.
func paint(title, cell string, r *ledger.Row) string {
	code := ""
	switch {
	case title == "reading" && r.Working.Record.Reading == "doubtful":
		code = "31"
	case title == "reading" && r.Working.Record.Reading == "look":
		code = "33"
	case title == "state" && (r.State == ledger.StateDiffering || r.Gone != ""):
		code = "35"
	case title == "state" && r.State != ledger.StateOpen:
		code = "32"
	case title == "id":
		code = "2"
	}
	if code == "" {
		return cell
	}
	return "\x1b[" + code + "m" + cell + "\x1b[0m"
}
