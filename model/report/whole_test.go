package report

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"testing"
)

// A file appears whole or not at all: when its writing fails half way, what was
// there before is still there, and nothing else is.
func TestWriteWhole(t *testing.T) {
	path := filepath.Join(t.TempDir(), "table.csv")
	write := func(text string, fail error) error {
		return writeWhole(path, func(w io.Writer) error {
			if _, err := io.WriteString(w, text); err != nil {
				t.Fatal(err)
			}
			return fail
		})
	}
	broken := errors.New("broken")
	if err := write("first half", broken); !errors.Is(err, broken) {
		t.Errorf("error %v", err)
	}
	if _, err := os.Stat(path); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a half-written file appeared: %v", err)
	}
	if err := write("whole", nil); err != nil {
		t.Fatal(err)
	}
	if err := write("another half", broken); !errors.Is(err, broken) {
		t.Errorf("error %v", err)
	}
	if data, err := os.ReadFile(path); err != nil || string(data) != "whole" {
		t.Errorf("%q, %v", data, err)
	}
	if entries, err := os.ReadDir(filepath.Dir(path)); err != nil || len(entries) != 1 {
		t.Errorf("%d files, %v", len(entries), err)
	}
}
