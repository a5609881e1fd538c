package main

import (
	"io"
	"testing"
)

// TestRun: no published value is missed, and a filter keeps some of them.
func TestRun(t *testing.T) {
	missed, err := run(options{out: t.TempDir(), data: "../../testdata/handbook"}, io.Discard)
	if err != nil || missed > 0 {
		t.Errorf("%d values missed, error %v", missed, err)
	}
	if _, err := run(options{out: t.TempDir(), data: "../../testdata/handbook", topic: "nosuch"}, io.Discard); err == nil {
		t.Error("an unknown topic is not an error")
	}
}
