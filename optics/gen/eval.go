package main

import (
	"go/ast"
	"go/token"
	"go/types"
	"math"
)

// eval returns what an expression stands for.
func (t *tracer) eval(s *scope, e ast.Expr) value {
	if tv := t.info.Types[e]; tv.Value != nil {
		if v := t.constantOf(e, tv); v != nil {
			return v
		}
	}
	switch e := e.(type) {
	case *ast.ParenExpr:
		return t.eval(s, e.X)
	case *ast.Ident:
		if e.Name == "true" || e.Name == "false" {
			return nil
		}
		v, ok := s.vars[t.info.Uses[e]]
		if !ok {
			t.fail(e, "%s is not known", e.Name)
		}
		return v
	case *ast.SelectorExpr:
		return t.field(e, t.eval(s, e.X).(place), e.Sel.Name)
	case *ast.IndexExpr:
		return t.element(s, e)
	case *ast.SliceExpr:
		return t.eval(s, e.X)
	case *ast.UnaryExpr:
		return t.unary(s, e)
	case *ast.BinaryExpr:
		return t.operation(s, e)
	case *ast.CallExpr:
		return t.callExpr(s, e)
	}
	t.fail(e, "expression %T", e)
	return nil
}

// field returns the place of a field.
func (t *tracer) field(at ast.Node, p place, name string) value {
	off, typ := fieldOffset(p.typ, name)
	return place{p.param, p.off + off, typ}
}

// element is a lane of a row or a part of an array of structs.
func (t *tracer) element(s *scope, e *ast.IndexExpr) value {
	p := t.eval(s, e.X).(place)
	i, ok := t.eval(s, e.Index).(index)
	if !ok || !i.known {
		t.fail(e, "index is not known")
	}
	elem := elemType(p.typ)
	if isFloat(elem) {
		if !i.lane || i.c != 0 {
			t.fail(e, "index is not the lane")
		}
		return t.load(e, p)
	}
	return place{p.param, p.off + i.c*sizes.Sizeof(elem), elem}
}

func elemType(typ types.Type) types.Type {
	switch u := typ.Underlying().(type) {
	case *types.Array:
		return u.Elem()
	case *types.Slice:
		return u.Elem()
	case *types.Pointer:
		return elemType(u.Elem())
	}
	return nil
}

func isFloat(t types.Type) bool {
	b, ok := t.Underlying().(*types.Basic)
	return ok && b.Kind() == types.Float64
}

func (t *tracer) unary(s *scope, e *ast.UnaryExpr) value {
	v := t.eval(s, e.X)
	switch e.Op {
	case token.AND:
		return v
	case token.NOT:
		return t.not(v.(*node))
	case token.SUB:
		n := v.(*node)
		if isFloat(t.info.TypeOf(e.X)) {
			return t.node(&node{op: opXor, args: []*node{n, t.node(&node{op: opConst, bits: 1 << 63})}})
		}
		return t.node(&node{op: opSubInt, args: []*node{t.node(&node{op: opConst}), n}})
	}
	t.fail(e, "operator %s", e.Op)
	return nil
}

func (t *tracer) operation(s *scope, e *ast.BinaryExpr) value {
	if e.Op == token.SHL {
		count := t.eval(s, e.Y)
		c, ok := count.(index)
		if n, isNode := count.(*node); isNode && n.op == opConst {
			c, ok = index{known: true, c: int64(n.bits)}, true
		}
		if !ok || !c.known {
			t.fail(e, "shift is not constant")
		}
		return t.node(&node{op: opShift, imm: int(c.c), args: []*node{t.eval(s, e.X).(*node)}})
	}
	x, y := t.eval(s, e.X), t.eval(s, e.Y)
	a, isNode := x.(*node)
	b, both := y.(*node)
	if isNode && both {
		integer := !isFloat(t.info.TypeOf(e.X))
		return t.binary(e, e.Op, a, b, integer)
	}
	i, iok := x.(index)
	j, jok := y.(index)
	if !iok || !jok {
		t.fail(e, "operands of %s", e.Op)
	}
	return t.indexOp(e.Op, i, j)
}

// indexOp follows the few operations on indices that rows use.
func (t *tracer) indexOp(op token.Token, i, j index) value {
	known := i.known && j.known
	switch {
	case known && op == token.ADD && !(i.lane && j.lane):
		return index{known, i.lane || j.lane, i.c + j.c}
	case known && op == token.SUB && !j.lane:
		return index{known, i.lane, i.c - j.c}
	case known && op == token.AND && i.lane && i.c == 0 && !j.lane: // the lane is below the mask
		return i
	}
	return index{}
}

var arithmetic = map[token.Token]opcode{token.ADD: opAdd, token.SUB: opSub, token.MUL: opMul, token.QUO: opDiv}
var integral = map[token.Token]opcode{token.ADD: opAddInt, token.SUB: opSubInt, token.AND: opAnd, token.OR: opOr, token.XOR: opXor}
var compared = map[token.Token]predicate{token.LSS: less, token.LEQ: lessEqual, token.GTR: greater, token.GEQ: greaterEqual}

func (t *tracer) binary(at ast.Node, op token.Token, a, b *node, integer bool) *node {
	if p, ok := compared[op]; ok && !integer {
		return t.node(&node{op: opCompare, imm: int(p), args: []*node{a, b}})
	}
	table := arithmetic
	if integer {
		table = integral
	}
	code, ok := table[op]
	switch {
	case op == token.LAND:
		code = opAnd
	case op == token.LOR:
		code = opOr
	case !ok:
		t.fail(at, "operator %s", op)
	}
	return t.node(&node{op: code, args: []*node{a, b}})
}

// not negates a condition by its comparisons.
func (t *tracer) not(n *node) *node {
	switch n.op {
	case opCompare:
		return t.node(&node{op: opCompare, imm: int(predicate(n.imm).negated()), args: n.args})
	case opAnd, opOr:
		op := opAnd
		if n.op == opAnd {
			op = opOr
		}
		return t.node(&node{op: op, args: []*node{t.not(n.args[0]), t.not(n.args[1])}})
	}
	panic("negation of no condition")
}

// choice returns yes where cond holds and no elsewhere. The larger of two
// numbers is an instruction: x > y ? x : y, also where one of them is NaN.
func (t *tracer) choice(cond, yes, no *node) *node {
	if cond.op == opCompare {
		x, y := cond.args[0], cond.args[1]
		switch p := predicate(cond.imm); {
		case p == less && yes == y && no == x, p == greater && yes == x && no == y:
			return t.node(&node{op: opMax, args: []*node{yes, no}})
		case p == notGreater && yes == y && no == x, p == notLess && yes == x && no == y:
			return t.node(&node{op: opMax, args: []*node{no, yes}})
		}
	}
	return t.node(&node{op: opChoose, args: []*node{cond, yes, no}})
}

// callExpr inlines functions of the package; conversions to float64 round what
// is rounded already.
func (t *tracer) callExpr(s *scope, e *ast.CallExpr) value {
	if t.info.Types[e.Fun].IsType() {
		return t.eval(s, e.Args[0])
	}
	switch f := e.Fun.(type) {
	case *ast.Ident:
		if f.Name == "len" {
			return index{}
		}
		return t.inline(s, e, t.info.Uses[f], nil)
	case *ast.SelectorExpr:
		if pkg, ok := f.X.(*ast.Ident); ok && pkg.Name == "math" {
			return t.mathCall(s, e, f.Sel.Name)
		}
		return t.inline(s, e, t.info.Uses[f.Sel], []value{t.eval(s, f.X)})
	}
	t.fail(e, "call of %T", e.Fun)
	return nil
}

func (t *tracer) inline(s *scope, e *ast.CallExpr, obj types.Object, args []value) value {
	fn := t.funcs[obj]
	if fn == nil {
		t.fail(e, "call of an unknown function")
	}
	for _, a := range e.Args {
		args = append(args, t.eval(s, a))
	}
	out := t.call(fn, args)
	if len(out) == 1 {
		return out[0]
	}
	return out
}

func (t *tracer) mathCall(s *scope, e *ast.CallExpr, name string) value {
	x := t.eval(s, e.Args[0]).(*node)
	switch name {
	case "Sqrt":
		return t.node(&node{op: opSqrt, args: []*node{x}})
	case "Abs":
		return t.node(&node{op: opAnd, args: []*node{x, t.node(&node{op: opConst, bits: math.MaxInt64})}})
	case "Float64bits", "Float64frombits":
		return x
	}
	t.fail(e, "math.%s", name)
	return nil
}
