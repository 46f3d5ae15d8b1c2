package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// writeFile writes a file whole or not at all: another file is written beside it
// and takes its name when it is complete.
func writeFile(path string, write func(w io.Writer) error) error {
	f, err := os.CreateTemp(filepath.Dir(path), ".halfspan-*")
	if err != nil {
		return fmt.Errorf("%s cannot be written: %w", path, bare(err))
	}
	defer os.Remove(f.Name()) // fails once it has its name
	out := bufio.NewWriter(f)
	if err := write(out); err != nil {
		f.Close()
		return err
	}
	// CreateTemp keeps others from reading what is meant for them, too.
	if err := errors.Join(out.Flush(), f.Chmod(0o644), f.Sync(), f.Close()); err != nil {
		return fmt.Errorf("writing %s: %w", path, err)
	}
	if err := os.Rename(f.Name(), path); err != nil {
		return fmt.Errorf("writing %s: %w", path, err)
	}
	return nil
}
