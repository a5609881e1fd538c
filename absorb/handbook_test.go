package absorb_test

import (
	"testing"

	"photonledger/internal/handbook"
)

// TestHandbook compares with the published values of testdata/handbook/absorb_*.csv;
// each row names its source and how it is known.
func TestHandbook(t *testing.T) {
	handbook.Check(t, "../testdata/handbook", "absorb_")
}
