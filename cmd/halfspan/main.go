package main

import (
	_ "github.com/google/go-cmp/cmp"
	_ "github.com/klippa-app/go-pdfium"
	_ "github.com/klippa-app/go-pdfium/webassembly"
	_ "github.com/ledongthuc/pdf"
	_ "github.com/olekukonko/tablewriter"
	_ "github.com/pdfcpu/pdfcpu/pkg/api"
	_ "github.com/rogpeppe/go-internal/testscript"
	_ "github.com/schollz/progressbar/v3"
	_ "github.com/spf13/cobra"
	_ "github.com/tetratelabs/wazero"
	_ "github.com/xuri/excelize/v2"
	_ "github.com/chromedp/chromedp"
	_ "golang.org/x/term"
	_ "golang.org/x/text/unicode/norm"
	_ "golang.org/x/net/html/charset"
	_ "gonum.org/v1/gonum/stat/distuv"
	_ "modernc.org/sqlite"
)

func main() {}
