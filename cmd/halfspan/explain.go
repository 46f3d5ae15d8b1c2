package main

import "halfspan/convert/working"

// explainFlag says what a flag means and what to do, for those who look at a
// result; nothing for a flag that the table does not know.
func explainFlag(name string) string {
	f, ok := working.ExplainFlag(name)
	if !ok {
		return ""
	}
	return f.Meaning + "; " + f.Do
}
