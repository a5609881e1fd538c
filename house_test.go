package photonledger

import (
	"os/exec"
	"strings"
	"testing"
)

// TestPackagesAreIndependent: a user with own data can take any one package
// alone, so none of the five may import another, nor the test helpers.
func TestPackagesAreIndependent(t *testing.T) {
	for _, p := range []string{"optics", "absorb", "spectrum", "nk", "lighttrap"} {
		out, err := exec.Command("go", "list", "-deps", "./"+p).CombinedOutput()
		if err != nil {
			t.Fatalf("go list ./%s: %v\n%s", p, err, out)
		}
		for _, dep := range strings.Fields(string(out)) {
			if strings.HasPrefix(dep, "photonledger/") && dep != "photonledger/"+p && !strings.HasPrefix(dep, "photonledger/"+p+"/") {
				t.Errorf("package %s imports %s", p, dep)
			}
		}
	}
}
