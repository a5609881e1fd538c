package main

import (
	"fmt"
	"go/ast"
	"go/constant"
	"go/importer"
	"go/parser"
	"go/token"
	"go/types"
	"math"
	"slices"
)

// program is the type-checked package.
type program struct {
	fset  *token.FileSet
	info  *types.Info
	funcs map[types.Object]*ast.FuncDecl
	names map[string]*ast.FuncDecl // functions without receiver
}

var sizes = types.SizesFor("gc", "amd64")

// load parses and checks the package in dir. Of the packages that it imports
// only math matters for row functions; errors about the others are ignored.
func load(dir string) (*program, error) {
	p := &program{fset: token.NewFileSet(), funcs: map[types.Object]*ast.FuncDecl{}, names: map[string]*ast.FuncDecl{}}
	names, err := sources(dir)
	if err != nil {
		return nil, err
	}
	var files []*ast.File
	for _, name := range names {
		f, err := parser.ParseFile(p.fset, name, nil, parser.SkipObjectResolution)
		if err != nil {
			return nil, err
		}
		files = append(files, f)
	}
	p.info = &types.Info{Types: map[ast.Expr]types.TypeAndValue{}, Defs: map[*ast.Ident]types.Object{},
		Uses: map[*ast.Ident]types.Object{}, Selections: map[*ast.SelectorExpr]*types.Selection{}}
	conf := types.Config{Importer: mathOnly{importer.ForCompiler(p.fset, "source", nil)}, Sizes: sizes, Error: func(error) {}}
	conf.Check("optics", p.fset, files, p.info)
	for _, f := range files {
		for _, d := range f.Decls {
			if fn, ok := d.(*ast.FuncDecl); ok {
				p.funcs[p.info.Defs[fn.Name]] = fn
				if fn.Recv == nil {
					p.names[fn.Name.Name] = fn
				}
			}
		}
	}
	return p, nil
}

type mathOnly struct{ types.Importer }

func (m mathOnly) Import(path string) (*types.Package, error) {
	if path == "math" {
		return m.Importer.Import(path)
	}
	return nil, fmt.Errorf("package %s is not needed", path)
}

// value is what an expression of a row function stands for: *node, place,
// index, or a list of them for several results.
type value any

// place is memory behind a parameter: everything of type typ from a constant
// offset on. Lane i of a row lies 8i bytes further.
type place struct {
	param int
	off   int64
	typ   types.Type
}

// index is an integer: a constant, plus the lane.
type index struct {
	known bool
	lane  bool
	c     int64
}

// flag is a bool result that a row function sets for any of its lanes.
type flag struct{}

// tracer executes one kernel.
type tracer struct {
	*program
	name    string
	params  []*types.Var
	ops     []*node // in the order of the source
	pure    map[string]*node
	memory  map[location]*node // what is known to lie there
	stored  map[location]*node // the last store
	flagged bool
}

type location struct {
	param int
	off   int64
}

// scope holds the variables of one function call.
type scope struct {
	vars    map[types.Object]value
	results []types.Object
}

// trace executes the kernel's function with its parameters as symbols.
func (p *program) trace(name string) (t *tracer, err error) {
	defer func() {
		if e, ok := recover().(traceError); ok {
			err = e
		}
	}()
	fn := p.names[name]
	if fn == nil {
		return nil, fmt.Errorf("no such function")
	}
	t = &tracer{program: p, name: name, pure: map[string]*node{}, memory: map[location]*node{}, stored: map[location]*node{}}
	sig := p.info.Defs[fn.Name].Type().(*types.Signature)
	var args []value
	for i := range sig.Params().Len() {
		v := sig.Params().At(i)
		t.params = append(t.params, v)
		switch u := v.Type().Underlying().(type) {
		case *types.Pointer:
			args = append(args, place{param: i, typ: u.Elem()})
		case *types.Slice:
			args = append(args, place{param: i, typ: u})
		case *types.Basic:
			if u.Kind() == types.Float64 {
				args = append(args, t.node(&node{op: opScalar, param: i}))
			} else {
				args = append(args, index{})
			}
		}
	}
	t.call(fn, args)
	t.prune()
	return t, nil
}

type traceError struct{ error }

func (t *tracer) fail(at ast.Node, format string, args ...any) {
	panic(traceError{fmt.Errorf("%s: %s", t.fset.Position(at.Pos()), fmt.Sprintf(format, args...))})
}

// node returns the operation, or an equal one that was met before.
func (t *tracer) node(n *node) *node {
	key := n.key()
	if old := t.pure[key]; old != nil {
		return old
	}
	t.pure[key] = n
	t.ops = append(t.ops, n)
	return n
}

func (t *tracer) constant(v float64) *node {
	return t.node(&node{op: opConst, bits: math.Float64bits(v)})
}

// call executes a function of the package and returns its results.
func (t *tracer) call(fn *ast.FuncDecl, args []value) []value {
	s := &scope{vars: map[types.Object]value{}}
	fields := fn.Type.Params.List
	if fn.Recv != nil {
		fields = append(append([]*ast.Field{}, fn.Recv.List...), fields...)
	}
	i := 0
	for _, f := range fields {
		for _, name := range f.Names {
			s.vars[t.info.Defs[name]] = args[i]
			i++
		}
	}
	if fn.Type.Results != nil {
		for _, f := range fn.Type.Results.List {
			for _, name := range f.Names {
				obj := t.info.Defs[name]
				s.results = append(s.results, obj)
				if b, ok := obj.Type().(*types.Basic); ok && b.Kind() == types.Bool {
					s.vars[obj] = flag{}
				}
			}
		}
	}
	return t.block(s, fn.Body.List)
}

// block executes statements up to a return and gives its results.
func (t *tracer) block(s *scope, list []ast.Stmt) []value {
	for i, st := range list {
		switch st := st.(type) {
		case *ast.AssignStmt:
			t.assign(s, st)
		case *ast.ExprStmt:
			t.eval(s, st.X)
		case *ast.RangeStmt:
			t.loop(s, st)
		case *ast.ForStmt:
			// A loop in larger steps does the same for several lanes at a time.
			if _, one := st.Post.(*ast.IncDecStmt); one {
				t.lane(s, st.Init.(*ast.AssignStmt).Lhs[0], st.Body)
			}
		case *ast.IfStmt:
			cond, ok := t.eval(s, st.Cond).(*node)
			if !ok {
				continue // a bound of the loop
			}
			if ret, ok := st.Body.List[0].(*ast.ReturnStmt); ok {
				return t.choose(cond, t.returned(s, ret), t.block(s, list[i+1:]))
			}
			t.branch(s, cond, st.Body.List)
		case *ast.ReturnStmt:
			return t.returned(s, st)
		default:
			t.fail(st, "statement %T", st)
		}
	}
	return nil
}

func (t *tracer) returned(s *scope, st *ast.ReturnStmt) []value {
	var out []value
	for _, e := range st.Results {
		out = append(out, t.eval(s, e))
	}
	return out
}

func (t *tracer) choose(cond *node, yes, no []value) []value {
	out := make([]value, len(yes))
	for i := range yes {
		out[i] = t.choice(cond, yes[i].(*node), no[i].(*node))
	}
	return out
}

// loop executes the body of the loop over the lanes once.
func (t *tracer) loop(s *scope, st *ast.RangeStmt) {
	if st.Value != nil {
		s.vars[t.info.Defs[st.Value.(*ast.Ident)]] = t.load(st, t.eval(s, st.X).(place))
	}
	t.lane(s, st.Key, st.Body)
}

func (t *tracer) lane(s *scope, key ast.Expr, body *ast.BlockStmt) {
	s.vars[t.info.Defs[key.(*ast.Ident)]] = index{known: true, lane: true}
	t.block(s, body.List)
}

// branch executes assignments that depend on a condition: every variable
// becomes a choice.
func (t *tracer) branch(s *scope, cond *node, list []ast.Stmt) {
	for _, st := range list {
		a, ok := st.(*ast.AssignStmt)
		if !ok || a.Tok != token.ASSIGN || len(a.Lhs) != 1 {
			t.fail(st, "conditional statement %T", st)
		}
		obj := t.info.Uses[a.Lhs[0].(*ast.Ident)]
		if _, ok := s.vars[obj].(flag); ok {
			t.flagged = true
			t.ops = append(t.ops, &node{op: opFlag, args: []*node{cond}})
			continue
		}
		s.vars[obj] = t.choice(cond, t.eval(s, a.Rhs[0]).(*node), s.vars[obj].(*node))
	}
}

// assign executes an assignment. Right sides are evaluated first. An assignment
// to the blank name asks for nothing but pointers.
func (t *tracer) assign(s *scope, st *ast.AssignStmt) {
	if name, ok := st.Lhs[0].(*ast.Ident); ok && name.Name == "_" {
		return
	}
	var right []value
	if len(st.Rhs) == 1 && len(st.Lhs) > 1 {
		right = t.eval(s, st.Rhs[0]).([]value)
	} else {
		for _, e := range st.Rhs {
			right = append(right, t.eval(s, e))
		}
	}
	for i, left := range st.Lhs {
		v := right[i]
		if list, ok := v.([]value); ok && len(list) == 1 {
			v = list[0]
		}
		if op, ok := assignOps[st.Tok]; ok {
			v = t.binary(st, op, t.eval(s, left).(*node), v.(*node), !isFloat(t.info.TypeOf(left)))
		}
		switch left := left.(type) {
		case *ast.Ident:
			obj := t.info.Defs[left]
			if obj == nil {
				obj = t.info.Uses[left]
			}
			s.vars[obj] = v
		case *ast.IndexExpr:
			t.store(t.eval(s, left.X).(place), v.(*node))
		default:
			t.fail(left, "assignment to %T", left)
		}
	}
}

var assignOps = map[token.Token]token.Token{token.ADD_ASSIGN: token.ADD, token.SUB_ASSIGN: token.SUB,
	token.MUL_ASSIGN: token.MUL, token.QUO_ASSIGN: token.QUO, token.XOR_ASSIGN: token.XOR}

// load returns what lies at this lane of a row.
func (t *tracer) load(at ast.Node, p place) *node {
	loc := location{p.param, p.off}
	if n := t.memory[loc]; n != nil {
		return n
	}
	for other := range t.stored {
		if other.param != loc.param && t.mayOverlap(other.param, loc.param) && other.off == loc.off {
			t.fail(at, "load of a row that may have been stored through another parameter")
		}
	}
	n := &node{op: opLoad, param: p.param, off: p.off}
	t.ops = append(t.ops, n)
	t.memory[loc] = n
	return n
}

// mayOverlap reports whether two parameters can be the same row: pointers of
// the same type. Slices never overlap but for equal ones, in which every lane is
// loaded before it is stored.
func (t *tracer) mayOverlap(a, b int) bool {
	_, pointer := t.params[a].Type().(*types.Pointer)
	return pointer && types.Identical(t.params[a].Type(), t.params[b].Type())
}

func (t *tracer) store(p place, v *node) {
	loc := location{p.param, p.off}
	n := &node{op: opStore, param: p.param, off: p.off, args: []*node{v}}
	if old := t.stored[loc]; old != nil {
		old.dead = true
	}
	t.stored[loc], t.memory[loc] = n, v
	for i := range t.params {
		if i != p.param && t.mayOverlap(i, p.param) {
			delete(t.memory, location{i, p.off})
		}
	}
	t.ops = append(t.ops, n)
}

// prune removes the operations without effect.
func (t *tracer) prune() {
	used := map[*node]bool{}
	var kept []*node
	for _, n := range slices.Backward(t.ops) {
		if used[n] || !n.dead && (n.op == opStore || n.op == opFlag) {
			for _, a := range n.args {
				used[a] = true
			}
			kept = append(kept, n)
		}
	}
	slices.Reverse(kept)
	t.ops = kept
}

func fieldOffset(t types.Type, name string) (int64, types.Type) {
	st := t.Underlying().(*types.Struct)
	var fields []*types.Var
	for i := range st.NumFields() {
		fields = append(fields, st.Field(i))
	}
	offsets := sizes.Offsetsof(fields)
	for i, f := range fields {
		if f.Name() == name {
			return offsets[i], f.Type()
		}
	}
	panic(traceError{fmt.Errorf("no field %s in %s", name, t)})
}

// constantOf returns the node of a constant expression of float64 or uint64.
func (t *tracer) constantOf(e ast.Expr, tv types.TypeAndValue) value {
	b, ok := tv.Type.Underlying().(*types.Basic)
	if !ok {
		return nil
	}
	switch {
	case b.Info()&types.IsFloat != 0:
		v, _ := constant.Float64Val(tv.Value)
		return t.constant(v)
	case b.Kind() == types.Uint64:
		v, _ := constant.Uint64Val(constant.ToInt(tv.Value))
		return t.node(&node{op: opConst, bits: v})
	case b.Info()&types.IsInteger != 0:
		v, _ := constant.Int64Val(constant.ToInt(tv.Value))
		return index{known: true, c: v}
	}
	t.fail(e, "constant of type %s", b)
	return nil
}
