package workbook

import (
	"bytes"
	"errors"
	"io"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

// left lists the names in a folder.
func left(t *testing.T, folder string) string {
	t.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
	}
	return strings.Join(names, " ")
}

func TestSaveLeavesOneFile(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "plan.xlsx")
	for range 2 { // new, then over the old one
		if err := Save(path, sample(1)); err != nil {
			t.Fatal(err)
		}
	}
	if got := left(t, folder); got != "plan.xlsx" {
		t.Errorf("in the folder: %s", got)
	}
	info, err := os.Stat(path)
	if err != nil {
		t.Fatal(err)
	}
	if runtime.GOOS != "windows" && info.Mode().Perm() != 0o644 {
		t.Errorf("mode %v, want 0644", info.Mode().Perm())
	}
	file, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(file, written(t, sample(1))) {
		t.Error("Save and Write differ")
	}
}

func TestSaveFailing(t *testing.T) {
	for _, c := range []struct {
		name string
		save func(folder string) error
		left string
	}{
		{"a plan that cannot be laid out", func(d string) error { return Save(filepath.Join(d, "old.xlsx"), sample(0)) }, "old.xlsx"},
		{"a writer that fails halfway", func(d string) error {
			return replace(filepath.Join(d, "old.xlsx"), func(w io.Writer) error {
				io.WriteString(w, "half")
				return errors.New("the disk is full")
			})
		}, "old.xlsx"},
		{"a folder that is not there", func(d string) error { return Save(filepath.Join(d, "none", "plan.xlsx"), sample(1)) }, "old.xlsx"},
		{"a folder that is a file", func(d string) error { return Save(filepath.Join(d, "old.xlsx", "plan.xlsx"), sample(1)) }, "old.xlsx"},
		{"a target that is a folder", func(d string) error {
			if err := os.MkdirAll(filepath.Join(d, "z", "full"), 0o755); err != nil {
				return nil
			}
			return Save(filepath.Join(d, "z"), sample(1))
		}, "old.xlsx z"},
	} {
		t.Run(c.name, func(t *testing.T) {
			folder := t.TempDir()
			old := filepath.Join(folder, "old.xlsx")
			if err := os.WriteFile(old, []byte("old"), 0o600); err != nil {
				t.Fatal(err)
			}
			if err := c.save(folder); err == nil {
				t.Error("no error")
			}
			if got := left(t, folder); got != c.left {
				t.Errorf("left behind: %s, want %s", got, c.left)
			}
			if b, _ := os.ReadFile(old); string(b) != "old" {
				t.Errorf("the older file became %q", b)
			}
		})
	}
}

func TestSaveUnwritableFolder(t *testing.T) {
	if os.Geteuid() == 0 || runtime.GOOS == "windows" {
		t.Skip("permissions do not stop this user")
	}
	folder := t.TempDir()
	if err := os.Chmod(folder, 0o555); err != nil {
		t.Fatal(err)
	}
	defer os.Chmod(folder, 0o755)
	if err := Save(filepath.Join(folder, "plan.xlsx"), sample(1)); !errors.Is(err, os.ErrPermission) {
		t.Errorf("error %v, want permission denied", err)
	}
	if got := left(t, folder); got != "" {
		t.Errorf("left behind: %s", got)
	}
}

type failing struct{ after int }

func (f *failing) Write(b []byte) (int, error) {
	if len(b) > f.after {
		return f.after, io.ErrShortWrite
	}
	f.after -= len(b)
	return len(b), nil
}

func TestWriteFailing(t *testing.T) {
	for _, after := range []int{0, 1000} {
		if err := Write(&failing{after}, sample(1)); !errors.Is(err, io.ErrShortWrite) {
			t.Errorf("after %d bytes: error %v", after, err)
		}
	}
}

// What no workbook can be made of is refused before a byte is written.
func TestWriteRefuses(t *testing.T) {
	for name, change := range map[string]func(*Plan){
		"no units":         func(p *Plan) { p.Units = 0 },
		"too many units":   func(p *Plan) { p.Units = 201 },
		"unknown paper":    func(p *Plan) { p.Paper = "Foolscap" },
		"an endless bench": func(p *Plan) { *p = long(*p, maxRows+1) },
	} {
		t.Run(name, func(t *testing.T) {
			p := sample(1)
			change(&p)
			var b bytes.Buffer
			if err := Write(&b, p); err == nil || b.Len() > 0 {
				t.Errorf("error %v, %d bytes written", err, b.Len())
			}
		})
	}
}
