package photonledger

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// TestReadmeProgram: the first program of README.md builds and runs in a module
// of its own that imports this one, as a new user would do.
func TestReadmeProgram(t *testing.T) {
	readme, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	_, rest, ok := strings.Cut(string(readme), "```go\n")
	program, _, ok2 := strings.Cut(rest, "```")
	if !ok || !ok2 {
		t.Fatal("README.md has no Go code block")
	}
	if n := strings.Count(program, "\n"); n > 25 {
		t.Errorf("the first program has %d lines, promised are 25", n)
	}
	here, err := filepath.Abs(".")
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	mod, err := os.ReadFile("go.mod")
	if err != nil {
		t.Fatal(err)
	}
	// The same requirements as here, so that nothing new is looked up.
	modText := strings.Replace(string(mod), "module photonledger", "module example", 1) +
		"\nrequire photonledger v0.0.0\n\nreplace photonledger => " + here + "\n"
	sum, err := os.ReadFile("go.sum")
	if err != nil {
		t.Fatal(err)
	}
	for name, text := range map[string]string{"main.go": program, "go.mod": modText, "go.sum": string(sum)} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	cmd := exec.Command("go", "run", "-mod=mod", ".")
	cmd.Dir = dir
	out, err := cmd.CombinedOutput()
	if err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	lines := strings.Split(strings.TrimRight(string(out), "\n"), "\n")
	if len(lines) != 10 || !strings.HasPrefix(lines[0], " 300 nm  0.") {
		t.Errorf("unexpected output:\n%s", out)
	}
	t.Logf("%s", out)
}
