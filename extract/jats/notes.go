package jats

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/tidy"
)

// footNotes reads the notes below a table: <fn> with a label or with a raised
// mark in front, plain paragraphs, and paragraphs that hold several notes.
func (r *reader) footNotes(wrap *node) []paper.FootNote {
	var notes []paper.FootNote
	var read func(*node)
	read = func(n *node) {
		switch n.name {
		case "", "permissions":
		case "fn":
			notes = append(notes, r.footNote(n)...)
		case "table-wrap-foot", "fn-group":
			for _, k := range n.kids {
				read(k)
			}
		default:
			t, floats := r.textAndFloats(n)
			notes = append(notes, tidy.SplitNotes(t)...)
			for _, f := range floats {
				read(f)
			}
		}
	}
	for _, k := range wrap.kids {
		switch k.name {
		case "table-wrap-foot", "attrib", "p", "fn-group":
			read(k)
		}
	}
	notes = append(notes, r.cellNotes...)
	r.cellNotes = nil
	return notes
}

// footNote reads one <fn>: several paragraphs may be several notes.
func (r *reader) footNote(n *node) []paper.FootNote {
	mark := strings.Trim(r.text(n.child("label")).S, " .:()[]")
	if mark == "" {
		mark = n.get("symbol")
	}
	var notes []paper.FootNote
	rest := &node{name: "fn"}
	for _, k := range n.kids {
		switch k.name {
		case "label":
		case "p":
			notes = append(notes, tidy.SplitNotes(r.text(k))...)
		default:
			rest.kids = append(rest.kids, k)
		}
	}
	notes = append(notes, tidy.SplitNotes(r.text(rest))...)
	if mark != "" && len(notes) > 0 && notes[0].Mark == "" {
		notes[0].Mark = mark
	}
	return notes
}
