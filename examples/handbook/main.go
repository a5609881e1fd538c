// Command handbook computes the published check values of testdata/handbook with
// this library and prints quantity, published value, computed value, deviation
// and source. It writes handbook.csv and handbook.png, and exits with status 1 if
// a value misses its printed digits.
package main

import (
	"encoding/csv"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"

	"photonledger/internal/check"
	"photonledger/internal/handbook"
)

type options struct{ out, data, topic, known string }

func main() {
	var o options
	flags := flag.NewFlagSet("handbook", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	flags.StringVar(&o.out, "out", "out", "folder for handbook.csv and handbook.png")
	flags.StringVar(&o.data, "data", "testdata/handbook", "folder of the published values")
	flags.StringVar(&o.topic, "topic", "", "only files whose names begin so, for example optics or nk_models")
	flags.StringVar(&o.known, "known", "", "only values known so: read, computed, memory or practice")
	err := flags.Parse(os.Args[1:])
	if err == flag.ErrHelp {
		flags.SetOutput(os.Stdout)
		flags.Usage()
		return
	}
	ways := []string{"", check.Read, check.Computed, check.Memory, check.Practice}
	switch {
	case err != nil:
	case flags.NArg() > 0:
		err = fmt.Errorf("unexpected argument %q", flags.Arg(0))
	case !slices.Contains(ways, o.known):
		err = fmt.Errorf("-known %q: want one of %s", o.known, strings.Join(ways[1:], ", "))
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "handbook:", err)
		os.Exit(2)
	}
	missed, err := run(o, os.Stdout)
	if err != nil {
		fmt.Fprintln(os.Stderr, "handbook:", err)
	}
	if err != nil || missed > 0 {
		os.Exit(1)
	}
}

// result is one row and what this library computes for it.
type result struct {
	check.Row
	got float64
	ok  bool
}

// run computes all rows and reports how many miss their published value.
func run(o options, stdout io.Writer) (missed int, err error) {
	rows, err := handbook.Load(o.data, o.topic)
	if err != nil {
		return 0, err
	}
	var results []result
	table := tabwriter.NewWriter(stdout, 0, 0, 2, ' ', 0)
	fmt.Fprintln(table, "quantity\tinputs\tpublished\tcomputed\tdeviation\tknown\tsource")
	for _, row := range rows {
		if o.known != "" && row.Known != o.known {
			continue
		}
		got, err := handbook.Evaluate(row)
		if err != nil {
			return 0, err
		}
		r := result{row, got, row.Judge(got) == nil}
		results = append(results, r)
		mark := ""
		if !r.ok {
			missed++
			mark = " MISSED"
		}
		fmt.Fprintf(table, "%s\t%s\t%s %s\t%.10g\t%.1e%s\t%s\t%s\n", row.Quantity, inputs(row), row.Text, row.Unit, got, got-row.Value, mark, row.Known, short(row.Source, 60))
	}
	if err := table.Flush(); err != nil {
		return 0, err
	}
	if len(results) == 0 {
		return 0, fmt.Errorf("no value in %s is known as %q", o.data, o.known)
	}
	if err := os.MkdirAll(o.out, 0o755); err != nil {
		return 0, err
	}
	if err := write(filepath.Join(o.out, "handbook.csv"), results); err != nil {
		return 0, err
	}
	if err := drawFigure(filepath.Join(o.out, "handbook.png"), results); err != nil {
		return 0, err
	}
	_, err = fmt.Fprintf(stdout, "\n%d values, %d missed; wrote handbook.csv and handbook.png into %s\n", len(results), missed, o.out)
	return missed, err
}

// inputs lists the inputs of a row in alphabetical order.
func inputs(row check.Row) string {
	var list []string
	for k, v := range row.Inputs {
		list = append(list, k+"="+v)
	}
	slices.Sort(list)
	return short(strings.Join(list, " "), 60)
}

func short(s string, n int) string {
	if r := []rune(s); len(r) > n {
		return string(r[:n-3]) + "..."
	}
	return s
}

func write(path string, results []result) error {
	f, err := os.Create(path)
	if err != nil {
		return err
	}
	defer f.Close()
	out := csv.NewWriter(f)
	lines := [][]string{{"file", "line", "quantity", "inputs", "published", "unit", "computed", "allowed_deviation", "known", "source"}}
	number := func(v float64) string { return strconv.FormatFloat(v, 'g', 17, 64) }
	for _, r := range results {
		lines = append(lines, []string{r.File, strconv.Itoa(r.Line), r.Quantity, inputs(r.Row), r.Text, r.Unit, number(r.got), number(r.Tol), r.Known, r.Source})
	}
	if err := out.WriteAll(lines); err != nil {
		return err
	}
	return f.Close()
}

// share returns the deviation in units of the allowed one; an exact agreement
// with an exact value counts as none.
func (r result) share() float64 {
	if r.got == r.Value {
		return 0
	}
	return math.Abs(r.got-r.Value) / r.Tol
}
