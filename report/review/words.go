package review

import (
	"fmt"
	"strings"

	"halfspan/convert/working"
)

// Count writes a number with its noun: "1 paper", "3 papers".
func Count(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

// Printed writes what is printed of a record, on one line: "5.1 (95% CI 4.2 to
// 6.0)", "5.1 (SD 0.8)", "5.1 ± 0.8".
func Printed(r *working.Record) string {
	estimate := str(r.Estimate)
	spread := ""
	switch given := str(r.GivenAs); {
	case given == "unstated" && r.GivenValue != nil:
		return strings.TrimSpace(estimate + " ± " + *r.GivenValue)
	case r.GivenValue != nil && r.Lower == nil:
		spread = strings.ToUpper(given) + " " + *r.GivenValue
		if given == "range" {
			spread = "range " + *r.GivenValue
		}
	case r.Lower != nil || r.Upper != nil:
		spread = intervalName(r) + " " + or(str(r.Lower), "?") + " to " + or(str(r.Upper), "?")
	default:
		return estimate
	}
	return strings.TrimSpace(estimate + " (" + strings.TrimSpace(spread) + ")")
}

func intervalName(r *working.Record) string {
	switch given := str(r.GivenAs); given {
	case "ci":
		if r.Level == nil {
			return "CI"
		}
		return fmt.Sprintf("%s%% CI", working.Number(*r.Level))
	case "iqr":
		return "IQR"
	case "range":
		return "range"
	default:
		return ""
	}
}

// Spread writes the SD of a record, or its SE where there is no SD, shortened to
// what the printed digits can bear; a dash where there is neither.
func Spread(r *working.Record) string {
	switch {
	case r.SD != nil && r.Use == "printed" && r.GivenValue != nil:
		return *r.GivenValue
	case r.SD != nil:
		return Short(*r.SD)
	case r.SE != nil && r.Scale != nil && *r.Scale != "raw":
		return "SE " + Short(*r.SE) + " " + *r.Scale
	case r.SE != nil:
		return "SE " + Short(*r.SE)
	}
	return "-"
}

// DigitsAllow writes the range of SDs that the printed digits allow, where the
// SD was worked out.
func DigitsAllow(r *working.Record) string {
	if r.Use == "printed" || r.SDLow == nil || r.SDHigh == nil {
		return ""
	}
	return Short(*r.SDLow) + " to " + Short(*r.SDHigh)
}

// Short writes a computed number with 3 significant digits, or all digits of its
// whole part.
func Short(n working.Number) string {
	text := fmt.Sprintf("%.3g", float64(n))
	if strings.Contains(text, "e") {
		if v := float64(n); v >= 1000 || v <= -1000 {
			return fmt.Sprintf("%.0f", v)
		}
		return n.String()
	}
	return text
}

// Group writes the arms of a record.
func Group(r *working.Record) string {
	if r.Arm2 != nil {
		return str(r.Arm) + " vs " + *r.Arm2
	}
	return str(r.Arm)
}

// Sizes writes the sample sizes of a record.
func Sizes(r *working.Record) string {
	switch {
	case r.N != nil && r.N2 != nil:
		return fmt.Sprintf("%d, %d", *r.N, *r.N2)
	case r.N != nil:
		return fmt.Sprint(*r.N)
	case r.N2 != nil:
		return fmt.Sprintf("?, %d", *r.N2)
	}
	return "-"
}

func str(s *string) string {
	if s == nil {
		return ""
	}
	return *s
}

func or(s, instead string) string {
	if s == "" {
		return instead
	}
	return s
}

// oneLine makes text fit to be printed on one line of a terminal: no control
// characters, which could move the cursor, and no runs of white space.
func oneLine(s string) string {
	s = strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f || r >= 0x80 && r < 0xa0 || r == 0x202e || r == 0x202d || r >= 0x2066 && r <= 0x2069 {
			return ' '
		}
		return r
	}, s)
	return strings.Join(strings.Fields(s), " ")
}
