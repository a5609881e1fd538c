package handbook

import "testing"

// TestIntegration computes the published values that need several packages.
func TestIntegration(t *testing.T) {
	Check(t, "../../testdata/handbook", "integration_")
}
