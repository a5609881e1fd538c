package main

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"
)

// TestUpToDate: the generated files of the package belong to its row functions.
func TestUpToDate(t *testing.T) {
	files, err := generate("..")
	if err != nil {
		t.Fatal(err)
	}
	for name, want := range files {
		got, err := os.ReadFile(filepath.Join("..", name))
		if err != nil {
			t.Fatal(err)
		}
		// A checkout may have changed the line ends.
		if !bytes.Equal(bytes.ReplaceAll(got, []byte("\r\n"), []byte("\n")), want) {
			t.Errorf("%s is not up to date: run go generate ./optics", name)
		}
	}
}
