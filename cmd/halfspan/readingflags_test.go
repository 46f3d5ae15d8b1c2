package main

import (
	"slices"
	"testing"

	"halfspan/convert/working"
	"halfspan/extract"
	"halfspan/extract/paper"
)

// invented is a paper of running text and one table, as plain text.
func invented(methods, sentence, table string) string {
	if sentence == "" {
		sentence = "The colonies of both arms were weighed at the end of the feeding."
	}
	return "Methods\n\nThe colonies were fed for six weeks at two stations. " + methods + "\n\nResults\n\n" + sentence + "\n\n" + table + "\n"
}

const heads = "Outcome\tSyrup (n = 42)\tWater (n = 40)\n"

// raisedByReading shows for each flag that reading raises invented print that
// raises it.
func raisedByReading() map[string]string {
	return map[string]string{
		"n-kind-unclear":      invented("", "", "Table 1. Colonies, mean (SD)\n\n"+"Outcome\tSyrup (n = 42)\tSyrup (n = 42)\tWater (n = 40)\tWater (n = 40)\n\tBaseline\tWeek 6\tBaseline\tWeek 6\nColony mass, kg\t12.4 (1.3)\t14.1 (1.5)\t12.1 (1.2)\t13.0 (1.4)\nProtein, mg/mL\t8.1 (1.0)\t8.4 (1.1)\t7.7 (0.9)\t7.6 (1.0)"),
		"n-elsewhere":         invented("", "", "Table 1. Colonies at baseline, mean (SD)\n\n"+heads+"Colony mass, kg\t12.4 (1.3)\t12.1 (1.2)\n\nTable 2. Colonies at week 6, mean (SD)\n\nOutcome\tSyrup\tWater\nColony mass, kg\t14.1 (1.5)\t13.0 (1.4)"),
		"spread-from-methods": invented("Values are means ± SD.", "", "Table 1. Colonies at baseline\n\n"+heads+"Colony mass, kg\t12.4 ± 1.3\t12.1 ± 1.2\nFlight time, min\t24.6 ± 3.1\t22.8 ± 3.4"),
		"spread-conflict":     invented("Values are means ± SD. Results are given as mean ± SE.", "", "Table 1. Colonies at baseline\n\n"+heads+"Colony mass, kg\t12.4 ± 1.3\t12.1 ± 1.2\nFlight time, min\t24.6 ± 3.1\t22.8 ± 3.4"),
		"spread-ambiguous":    invented("", "", "Table 1. Colonies at baseline, mean (SD or SE)\n\n"+heads+"Colony mass, kg\t12.4 (1.3)\t12.1 (1.2)\nFlight time, min\t24.6 (3.1)\t22.8 (3.4)"),
		"spread-from-rows":    invented("", "", "Table 1. Colonies at baseline\n\n"+heads+"Colony mass, kg, mean ± SD\t12.4 ± 1.3\t12.1 ± 1.2\nFlight time, min, mean ± SD\t24.6 ± 3.1\t22.8 ± 3.4\nProtein, mg/mL\t8.1 ± 1.0\t7.7 ± 0.9"),
		"spread-unstated":     invented("", "", "Table 1. Colonies at baseline\n\n"+heads+"Colony mass, kg\t12.4 ± 1.3\t12.1 ± 1.2\nFlight time, min\t24.6 ± 3.1\t22.8 ± 3.4"),
		"count-or-spread":     invented("", "", "Table 1. Colonies at baseline\n\n"+heads+"Queens, n (%)\t42 (100)\t40 (100)\nFlight time, min, n (%)\t34 (5)\t32 (6)\nFlights a day, n (%)\t29 (4)\t28 (3)"),
		"level-elsewhere":     invented("We report 95% confidence intervals.", "", "Table 1. Colonies at week 6\n\nOutcome\tSyrup (n = 42)\tWater (n = 40)\tDifference (CI)\nColony mass, kg\t12.4\t12.1\t0.3 (-1.2 to 1.8)\nFlight time, min\t24.6\t22.8\t1.8 (0.1 to 3.5)"),
		"level-missing":       invented("", "", "Table 1. Colonies at week 6\n\nOutcome\tSyrup (n = 42)\tWater (n = 40)\tDifference (CI)\nColony mass, kg\t12.4\t12.1\t0.3 (-1.2 to 1.8)\nFlight time, min\t24.6\t22.8\t1.8 (0.1 to 3.5)"),
		"level-assumed":       invented("We report 95% confidence intervals for all of the ratios.", "Survival of the colonies was better with pollen (HR=0.72, CI=0.55–0.94, P = .02).", ""),
		"bound-not-a-number":  invented("", "", "Table 1. Colonies at week 6\n\nOutcome\tSyrup (n = 42)\tWater (n = 40)\tHazard ratio (95% CI)\nLoss of queens\t12\t10\t0.72 (0.31 to NE)\nLoss of colonies\t9\t8\t0.83 (0.41 to 1.69)"),
		"open-bound":          invented("", "The median homing time of the foragers was 24 min (95% CI 19 to not reached) in the syrup arm.", ""),
		"bounds-reversed":     invented("", "", "Table 1. Colonies at week 6\n\nOutcome\tSyrup (n = 42)\tWater (n = 40)\tDifference (95% CI)\nColony mass, kg\t12.4\t12.1\t0.3 (1.8 to -1.2)\nFlight time, min\t24.6\t22.8\t1.8 (0.1 to 3.5)"),
		"estimate-outside":    invented("", "", "Table 1. Colonies at week 6\n\nOutcome\tSyrup (n = 42)\tWater (n = 40)\tDifference (95% CI)\nColony mass, kg\t12.4\t12.1\t0.3 (1.2 to 1.8)\nFlight time, min\t24.6\t22.8\t1.8 (0.1 to 3.5)"),
		"from-the-table":      invented("", "The mean mass of the colonies fed with syrup was 12.43 kg (SD 1.32) when they were weighed.", "Table 1. Colonies at week 6, mean (SD)\n\n"+heads+"Colony mass, kg\t12.43 (1.32)\t12.12 (1.21)\nFlight time, min\t24.6 (3.1)\t22.8 (3.4)"),
		"arm-unclear":         invented("", "", "Table 1. Colonies at week 6\n\nOutcome\tMean difference (95% CI)\nColony mass, kg\t0.3 (-1.2 to 1.8)\nFlight time, min\t1.8 (0.1 to 3.5)"),
		"time-unclear":        invented("", "", "Table 1. Colonies at week 6, mean (SD)\n\n"+heads+"Colony mass, kg\t12.4 (1.3)\t12.1 (1.2)\nFlight time, min\t24.6 (3.1)\t22.8 (3.4)"),
		"statistic-assumed":   invented("", "", "Table 1. Colonies at week 6 (95% CI)\n\n"+heads+"Colony mass, kg\t12.4 (11.2 to 13.6)\t12.1 (11.0 to 13.2)\nFlight time, min\t24.6 (22.1 to 27.1)\t22.8 (20.2 to 25.4)"),
		"misprint":            invented("", "", "Table 1. Colonies at week 6, mean (SD)\n\n"+heads+"Colony mass, kg\t12..4 (1.3)\t12.1 (1.2)\nFlight time, min\t24.6 (3.1)\t22.8 (3.4)"),
		"in-methods":          invented("At the first weighing the colonies had a mean mass of 12.4 kg (SD 1.3), which is what the plan of the study rested on.", "", ""),
		"sign-differs":        invented("", "The mass of the colonies fell by 4.2 kg (95% CI −6.0 to −2.4) with water in the winter.", ""),
		"conventions-differ":  invented("Data are expressed as mean ± SD. In the figures values are shown as mean ± SE.", "The mass of the colonies was 12.4 ± 1.3 kg at the start.", ""),
		"interval-unnamed":    invented("Effects are given with 95% CI.", "The effect on the colonies was 1.84 (0.92–2.76) in the summer.", ""),
		"scale-differs":       invented("", "Acceptance was 62% (95% CI 0.51 to 0.73) in the colonies of the station.", ""),
		"power-of-ten":        invented("Data are mean ± SD.", "The spores in the bees of the hive were 2.1 × 10⁵ ± 0.4 × 10⁵ at the end.", ""),
		"n-conflict":          invented("", "", "Table 1. Colonies, mean (SD)\n\nOutcome\tBaseline\tBaseline\tWeek 6\tWeek 6\tDifference (95% CI)\n\tSyrup (n = 42)\tWater (n = 40)\tSyrup (n = 38)\tWater (n = 36)\t\nColony mass, kg\t12.4 (1.3)\t12.1 (1.2)\t14.1 (1.5)\t13.0 (1.4)\t1.1 (0.4 to 1.8)\nProtein, mg/mL\t8.1 (1.0)\t7.7 (0.9)\t8.4 (1.1)\t7.6 (1.0)\t0.8 (0.3 to 1.3)"),
		"n-from-text":         invented("Eighteen colonies were fed in a randomised crossover trial.", "", "Table 1. Colonies by feed, mean (SD)\n\nOutcome\tSyrup\tWater\nColony mass, kg\t12.4 (1.3)\t12.1 (1.2)\nFlight time, min\t24.6 (3.1)\t22.8 (3.4)"),
		"n-from-counts":       invented("", "", "Table 1. Colonies at the start, mean (SD) or share\n\nOutcome\tSyrup\tWater\nColony mass, kg\t12.4 (1.3)\t12.1 (1.2)\nSwarmed before\t43% [23/53]\t33% [16/49]\nTwo queens\t13% [7/53]\t10% [5/49]"),
		"n-at-baseline":       invented("", "", "Table 1. Colonies, mean (SD)\n\nOutcome\tSyrup (n = 42)\tWater (n = 40)\nColony mass, kg\nBaseline\t12.4 (1.3)\t12.1 (1.2)\nWeek 6\t14.1 (1.5)\t13.0 (1.4)\nWeek 12\t15.2 (1.6)\t13.4 (1.5)\nNote: the n for each arm is at baseline."),
		"n-total":             invented("", "", "Table 1. Colonies at week 6, mean (SD)\n\nOutcome\tn\tSyrup\tWater\nColony mass, kg\t82\t12.4 (1.3)\t12.1 (1.2)\nFlight time, min\t80\t24.6 (3.1)\t22.8 (3.4)"),
		"outcome-unclear":     invented("", "", "Table 1. Mass of the colonies in kg, mean (SD)\n\n\tSyrup (n = 42)\tWater (n = 40)\nBaseline\t12.4 (1.3)\t12.1 (1.2)\nWeek 6\t14.1 (1.5)\t13.0 (1.4)"),
		"columns-unclear":     invented("", "", "Table 1. Mass of the colonies in kg, mean (SD)\n\nStation\tWinter\tSummer\n\tSyrup\tWater\tPollen\nElm\t12.4 (1.3)\t12.1 (1.2)\t14.1 (1.5)\nOak\t13.4 (1.4)\t11.1 (1.1)\t13.0 (1.4)"),
		"row-shape-odd":       invented("", "", "Table 1. Colonies at week 6\n\nOutcome\tSyrup (n = 42)\t\nColony mass, kg, mean (95% CI)\t12.4\t11.2 to 13.6\nFlight time, min, mean (95% CI)\t24.6\t22.1 to 27.1"),
		"quoted":              "Discussion\n\nIn an earlier study the mean mass of the colonies was 12.4 kg (95% CI 11.2 to 13.6) with syrup in the winter [12].\n",
	}
}

func TestEveryFlagOfReadingCanBeRaised(t *testing.T) {
	for name, text := range raisedByReading() {
		t.Run(name, func(t *testing.T) {
			doc, err := extract.Read("hives.txt", []byte(text), extract.Options{})
			if err != nil {
				t.Fatal(err)
			}
			flags := flagsOf(doc)
			if !slices.Contains(flags, name) {
				t.Errorf("not raised, but %v", flags)
			}
		})
	}
}

func flagsOf(doc *paper.Document) []string {
	var flags []string
	for _, w := range working.Work(working.FactsOf(doc), extract.Find(doc)) {
		flags = append(flags, w.Record.Flags...)
	}
	slices.Sort(flags)
	return slices.Compact(flags)
}

// The doubts of the PDF readers come through to the results that were read there.
func TestDoubtsOfThePageAreRaised(t *testing.T) {
	const sentence = "The mean mass of the colonies was 12.4 kg (95% CI 11.2 to 13.6) with syrup at the end."
	box := paper.Box{X0: 100, Y0: 100, X1: 90000, Y1: 2000}
	place := paper.Place{Page: 1, Line: 1, Box: box, Origin: paper.Point{X: 100, Y: 100}}
	for _, kind := range []string{"readers-differ", "repaired", "unknown-sign"} {
		doc := &paper.Document{
			Path: "hives.pdf", Format: paper.PDF, Pages: []paper.Page{{Number: 1, Reader: "both", Box: box}},
			Blocks: []paper.Block{{Kind: paper.Paragraph, Zone: paper.Results, Section: "Results", Page: 1,
				Text: paper.TextRun{S: sentence, Runs: []paper.Run{{End: len(sentence), Place: place}}}}},
			Doubts: []paper.Doubt{{Page: 1, Box: box, Kind: kind, Text: "12.4 or 12.1"}},
		}
		if flags := flagsOf(doc); !slices.Contains(flags, kind) {
			t.Errorf("%s is not raised, but %v", kind, flags)
		}
		doc.Doubts, doc.Pages[0].Reader = nil, "ocr"
		if flags := flagsOf(doc); !slices.Contains(flags, "ocr") {
			t.Errorf("ocr is not raised, but %v", flags)
		}
	}
}
