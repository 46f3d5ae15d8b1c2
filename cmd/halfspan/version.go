package main

import (
	"fmt"
	"os"
	"runtime"
	"runtime/debug"
)

// version is the program's version, kept with every decision and export.
const version = "0.1.0"

// versionText is what --version says.
func versionText() string {
	text := "halfspan " + version
	if commit, changed := sourceState(); commit != "" {
		text += " (" + commit[:min(12, len(commit))]
		if changed {
			text += ", changed"
		}
		text += ")"
	}
	return fmt.Sprintf("%s %s %s/%s\n", text, runtime.Version(), runtime.GOOS, runtime.GOARCH)
}

// sourceState is the commit that the program was built from, and whether the
// files differed from it.
func sourceState() (commit string, changed bool) {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "", false
	}
	for _, s := range info.Settings {
		switch s.Key {
		case "vcs.revision":
			commit = s.Value
		case "vcs.modified":
			changed = s.Value == "true"
		}
	}
	return commit, changed
}

// readerKey names the reader of a paper: what was read by another is read again.
// A program built from changed sources is known by its file.
func readerKey(ocr bool) string {
	key := version
	commit, changed := sourceState()
	if commit != "" {
		key += " " + commit
	}
	if commit == "" || changed {
		if self, err := os.Executable(); err == nil {
			if info, err := os.Stat(self); err == nil {
				key += fmt.Sprintf(" %d-%d", info.Size(), info.ModTime().UnixNano())
			}
		}
	}
	if ocr {
		key += " ocr"
	}
	return key
}
