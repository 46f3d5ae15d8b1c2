package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// gathered is what the paths on the command line lead to.
type gathered struct {
	root   string      // deepest folder that holds everything named
	papers []paperFile // ordered by name
	passed []string    // names of files that are no papers by their type, ordered
	failed []unread    // what was named or met but cannot be opened
}

// paperFile is one file to be read.
type paperFile struct {
	path string // to open it
	name string // relative to the root, with '/'
}

// unread is a paper that could not be read, and why.
type unread struct {
	name, reason string
}

// paperEndings are the file name endings of papers in a folder. Files that are
// named on the command line are read whatever their ending.
var paperEndings = map[string]bool{".pdf": true, ".txt": true, ".text": true, ".xml": true, ".nxml": true}

// gather finds the papers behind files, folders and patterns. It fails where a
// path leads to nothing at all.
func gather(paths []string) (*gathered, error) {
	named, err := expand(paths)
	if err != nil {
		return nil, err
	}
	g := &gathered{root: commonFolder(named)}
	seen := map[string]bool{}
	for _, p := range named {
		if p.folder {
			g.walk(p.path, seen)
		} else {
			g.add(p.path, seen)
		}
	}
	slices.SortFunc(g.papers, func(a, b paperFile) int { return strings.Compare(a.name, b.name) })
	slices.Sort(g.passed)
	slices.SortFunc(g.failed, func(a, b unread) int { return strings.Compare(a.name, b.name) })
	return g, nil
}

// rebase makes the names relative to a folder above the root.
func (g *gathered) rebase(root string) {
	rel, err := filepath.Rel(root, g.root)
	if err != nil {
		return // within says that there is such a path
	}
	prefix := filepath.ToSlash(rel) + "/"
	for i := range g.papers {
		g.papers[i].name = prefix + g.papers[i].name
	}
	for i := range g.passed {
		g.passed[i] = prefix + g.passed[i]
	}
	for i := range g.failed {
		g.failed[i].name = prefix + g.failed[i].name
	}
	g.root = root
}

type namedPath struct {
	path   string
	folder bool
}

// notAFileReason is why pipes, sockets and devices are not opened: reading one
// may never end.
const notAFileReason = "it is a pipe, a socket or a device, not a file: name a file or a folder"

// namedOf takes a path as it is named: it must lead to a file or a folder.
func namedOf(path string) (namedPath, error) {
	info, err := os.Stat(path)
	if err != nil {
		return namedPath{}, pathError(path, err)
	}
	if special(info) {
		return namedPath{}, fmt.Errorf("%s: %s", path, notAFileReason)
	}
	return namedPath{filepath.Clean(path), info.IsDir()}, nil
}

// expand resolves patterns, which some shells leave to the program.
func expand(paths []string) ([]namedPath, error) {
	var named []namedPath
	for _, p := range paths {
		one, err := namedOf(p)
		if err == nil {
			named = append(named, one)
			continue
		}
		matches, globErr := filepath.Glob(p)
		if !strings.ContainsAny(p, "*?[") || globErr != nil || len(matches) == 0 {
			return nil, err
		}
		for _, m := range matches {
			one, err := namedOf(m)
			if err != nil {
				return nil, err
			}
			named = append(named, one)
		}
	}
	return named, nil
}

func pathError(path string, err error) error {
	switch {
	case strings.ContainsAny(path, "*?["):
		return fmt.Errorf("%s: no file matches this pattern", path)
	case errors.Is(err, fs.ErrNotExist):
		return fmt.Errorf("%s: no such file or folder", path)
	case errors.Is(err, fs.ErrPermission):
		return fmt.Errorf("%s: no permission to open it", path)
	}
	return fmt.Errorf("%s: %w", path, err)
}

// commonFolder is the deepest folder that holds all that is named.
func commonFolder(named []namedPath) string {
	root := ""
	for i, p := range named {
		dir := p.path
		if !p.folder {
			dir = filepath.Dir(p.path)
		}
		if abs, err := filepath.Abs(dir); err == nil {
			dir = abs
		}
		if i == 0 {
			root = dir
		}
		for !within(dir, root) {
			parent := filepath.Dir(root)
			if parent == root {
				break
			}
			root = parent
		}
	}
	return root
}

func within(path, folder string) bool {
	rel, err := filepath.Rel(folder, path)
	return err == nil && rel != ".." && !strings.HasPrefix(rel, ".."+string(filepath.Separator))
}

func (g *gathered) name(path string) string {
	abs, err := filepath.Abs(path)
	if err != nil {
		return filepath.ToSlash(path)
	}
	rel, err := filepath.Rel(g.root, abs)
	if err != nil {
		return filepath.ToSlash(path)
	}
	return filepath.ToSlash(rel)
}

func (g *gathered) add(path string, seen map[string]bool) {
	name := g.name(path)
	if !seen[name] {
		seen[name] = true
		g.papers = append(g.papers, paperFile{path, name})
	}
}

func (g *gathered) walk(folder string, seen map[string]bool) {
	// The function never returns an error but SkipDir, so WalkDir does not either.
	_ = filepath.WalkDir(folder, func(path string, entry fs.DirEntry, err error) error {
		switch {
		case err != nil:
			reason := err.Error()
			if errors.Is(err, fs.ErrPermission) {
				reason = "no permission to open it: change the permissions, or move it out of the folder"
			}
			g.failed = append(g.failed, unread{g.name(path), reason})
			if entry != nil && entry.IsDir() {
				return fs.SkipDir
			}
		case entry.IsDir() || ownFile(entry.Name()):
		case notAFile(path) && hasPaperEnding(path):
			g.failed = append(g.failed, unread{g.name(path), notAFileReason})
		case notAFile(path):
			g.pass(path, seen)
		case isPaper(path):
			g.add(path, seen)
		default:
			g.pass(path, seen)
		}
		return nil
	})
}

func (g *gathered) pass(path string, seen map[string]bool) {
	if name := g.name(path); !seen[name] {
		seen[name] = true
		g.passed = append(g.passed, name)
	}
}

// ownFile tells the program's own files, which are not worth a word.
func ownFile(name string) bool {
	return strings.HasSuffix(name, ".ledger") || strings.HasSuffix(name, ".ledger-journal")
}

// special tells pipes, sockets and devices.
func special(info fs.FileInfo) bool { return !info.IsDir() && !info.Mode().IsRegular() }

// notAFile tells what path leads to; what cannot be told is left to the reader,
// who says why.
func notAFile(path string) bool {
	info, err := os.Stat(path)
	return err == nil && special(info)
}

func hasPaperEnding(path string) bool {
	return paperEndings[strings.ToLower(filepath.Ext(path))] && !strings.HasPrefix(filepath.Base(path), ".")
}

// isPaper tells a paper by its ending, or by the mark that begins every PDF.
func isPaper(path string) bool {
	if hasPaperEnding(path) {
		return true
	}
	f, err := os.Open(path)
	if err != nil {
		return false
	}
	defer f.Close()
	head := make([]byte, 5)
	n, _ := io.ReadFull(f, head)
	return bytes.Equal(head[:n], []byte("%PDF-"))
}
