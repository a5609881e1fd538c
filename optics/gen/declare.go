package main

import (
	"bytes"
	"fmt"
	"go/types"
	"strings"
)

func (t *tracer) vectorName() string { return t.name + "AVX2" }

// fastName is the name by which the package calls the kernel.
func (t *tracer) fastName() string {
	return "fast" + strings.ToUpper(t.name[:1]) + t.name[1:]
}

func local(p *types.Package) string { return "" }

// signature returns the parameters of the row function and its result.
func (t *tracer) signature() (params, names, result string) {
	var list, args []string
	for _, v := range t.params {
		list = append(list, v.Name()+" "+types.TypeString(v.Type(), local))
		args = append(args, v.Name())
	}
	if t.flagged {
		result = " bool"
	}
	return strings.Join(list, ", "), strings.Join(args, ", "), result
}

// forward writes the function of builds without vectors.
func (t *tracer) forward(w *bytes.Buffer) {
	params, names, result := t.signature()
	fmt.Fprintf(w, "func %s(%s)%s { %s%s(%s) }\n\n", t.fastName(), params, result, t.ret(), t.name, names)
}

func (t *tracer) ret() string {
	if t.flagged {
		return "return "
	}
	return ""
}

// declare writes the declaration of the assembly function and the function that
// chooses between it and the row function.
func (t *tracer) declare(w *bytes.Buffer) {
	var decl, call, slices, tail []string
	rows, count := false, ""
	for _, v := range t.params {
		name := v.Name()
		tail = append(tail, name)
		switch u := v.Type().Underlying().(type) {
		case *types.Slice:
			decl = append(decl, name+" *float64")
			call = append(call, "&"+name+"[0]")
			slices = append(slices, name)
			tail[len(tail)-1] = name + "[m:]"
		case *types.Pointer:
			rows = true
			decl = append(decl, name+" "+types.TypeString(v.Type(), local))
			call = append(call, name)
		case *types.Basic:
			if u.Kind() == types.Int {
				count = name
				continue
			}
			decl = append(decl, name+" float64")
			call = append(call, name)
		}
	}
	params, names, result := t.signature()
	fmt.Fprintf(w, "//go:noescape\nfunc %s(%s, groups int)%s\n\n", t.vectorName(), strings.Join(decl, ", "), result)
	fmt.Fprintf(w, "func %s(%s)%s {\n", t.fastName(), params, result)
	if count == "" {
		count = "b"
		fmt.Fprintf(w, "\tb := len(%s)\n", slices[0])
	}
	vector := fmt.Sprintf("%s(%s, ", t.vectorName(), strings.Join(call, ", "))
	if rows {
		// Rows are whole; a block that is not a multiple of four takes the twin.
		fmt.Fprintf(w, "\tif !hasVectors || %s == 0 || %s%%vectorLanes != 0 || %s > lanes {\n\t\t%s%s(%s)\n", count, count, count, t.ret(), t.name, names)
		if !t.flagged {
			fmt.Fprintf(w, "\t\treturn\n")
		}
		fmt.Fprintf(w, "\t}\n")
		for i, s := range slices {
			if i > 0 || count != "b" {
				fmt.Fprintf(w, "\t_ = %s[%s-1]\n", s, count)
			}
		}
		fmt.Fprintf(w, "\t%s%s%s/vectorLanes)\n}\n\n", t.ret(), vector, count)
		return
	}
	// Slices are of any length; the twin does the last lanes.
	for _, s := range slices[1:] {
		fmt.Fprintf(w, "\t%s = %s[:b]\n", s, s)
	}
	fmt.Fprintf(w, "\tm := 0\n\tif hasVectors && b >= vectorLanes {\n\t\tm = b &^ (vectorLanes - 1)\n")
	if t.flagged {
		fmt.Fprintf(w, "\t\tif %sm/vectorLanes) {\n\t\t\treturn true\n\t\t}\n", vector)
	} else {
		fmt.Fprintf(w, "\t\t%sm/vectorLanes)\n", vector)
	}
	fmt.Fprintf(w, "\t}\n\t%s%s(%s)\n}\n\n", t.ret(), t.name, strings.Join(tail, ", "))
}
