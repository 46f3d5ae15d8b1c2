package table

import (
	"fmt"
	"halfspan/extract/jats"
	"os"
	"testing"
)

func TestDebug(t *testing.T) {
	p := os.Getenv("P")
	if p == "" {
		t.Skip()
	}
	b, _ := os.ReadFile(p)
	doc, err := jats.Read(p, b)
	if err != nil {
		t.Fatal(err)
	}
	bd := newBinder(doc)
	fmt.Println("ARMS", bd.arms)
	for i, f := range bd.frames {
		if f == nil {
			continue
		}
		fmt.Println(i, tableName(f), "head", f.head, "(", f.tab.HeadRows, ") stub", f.stub, "cols", f.tab.Cols, "armRows", f.armRows, "colArms", f.colArms, "names", f.armNames())
		for c := range f.heads {
			fmt.Print("  col ", c, ":")
			for _, l := range f.heads[c] {
				pt := f.partOf(l)
				fmt.Printf(" [%s|%s|%d]", l.text, pt.name, pt.kind)
			}
			fmt.Println(" role", f.columnRole(f.tab.Rows-1, c).kind)
		}
		if os.Getenv("R") != "" {
			for r := f.head; r < f.tab.Rows; r++ {
				ln := f.lines[r]
				fmt.Print("   row ", r, " kind ", ln.kind, " g ", ln.groups, " lvl ", ln.level)
				for _, l := range ln.labels {
					fmt.Printf(" {%s}%v", l.text, l.marks)
				}
				fmt.Println(" role", f.rowRole(r).kind)
			}
		}
	}
}
