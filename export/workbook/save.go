package workbook

import (
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"
)

// Save writes the plan's workbook to path, whole or not at all: a temporary
// file in the same folder is filled, synced and renamed over path.
func Save(path string, p Plan) error {
	return replace(path, func(w io.Writer) error { return Write(w, p) })
}

// replace puts what fill writes at path in one step, with mode 0644. Whatever
// goes wrong, an older file at path stays as it was and no other file is left.
func replace(path string, fill func(io.Writer) error) (err error) {
	folder := filepath.Dir(path)
	f, err := os.CreateTemp(folder, ".batchwright-*.tmp")
	if err != nil {
		return fmt.Errorf("cannot write in %s: %w", folder, err)
	}
	defer func() {
		if err != nil {
			f.Close() // a second Close only returns an error
			os.Remove(f.Name())
		}
	}()
	if err = fill(f); err != nil {
		return err
	}
	if err = f.Chmod(0o644); err != nil && runtime.GOOS != "windows" {
		return err
	}
	if err = f.Sync(); err != nil {
		return err
	}
	if err = f.Close(); err != nil {
		return err
	}
	if err = os.Rename(f.Name(), path); err != nil {
		return fmt.Errorf("cannot replace %s (is it open in a spreadsheet program? close it there): %w", path, err)
	}
	syncFolder(folder)
	return nil
}

// syncFolder makes the rename last through a power cut. Not every system lets
// a folder be synced, and the file itself is already safe, so failing is fine.
func syncFolder(folder string) {
	d, err := os.Open(folder)
	if err != nil {
		return
	}
	d.Sync()
	d.Close()
}
