package main

import "fmt"

// opcode is an operation on four lanes.
type opcode int

const (
	opConst  opcode = iota // the same bits in every lane
	opScalar               // a parameter in every lane
	opLoad
	opStore
	opFlag // collects a condition
	opAdd
	opSub
	opMul
	opDiv
	opMax
	opSqrt
	opAnd
	opOr
	opXor
	opAddInt
	opSubInt
	opShift
	opCompare
	opChoose // where args[0] holds args[1], elsewhere args[2]
)

// mnemonics of the operations with two operands and of those with one.
var mnemonics = map[opcode]string{
	opAdd: "VADDPD", opSub: "VSUBPD", opMul: "VMULPD", opDiv: "VDIVPD", opMax: "VMAXPD",
	opAnd: "VANDPD", opOr: "VORPD", opXor: "VXORPD", opAddInt: "VPADDQ", opSubInt: "VPSUBQ",
}

var commutes = map[opcode]bool{opAdd: true, opMul: true, opAnd: true, opOr: true, opXor: true, opAddInt: true}

// predicate is the immediate operand of a comparison: quiet, and true for NaN
// only if negated.
type predicate int

const (
	less         predicate = 0x11
	lessEqual    predicate = 0x12
	greaterEqual predicate = 0x1d
	greater      predicate = 0x1e
	notLess      predicate = 0x15
	notLessEqual predicate = 0x16
	notGreaterEq predicate = 0x19
	notGreater   predicate = 0x1a
)

func (p predicate) negated() predicate {
	return map[predicate]predicate{less: notLess, lessEqual: notLessEqual, greaterEqual: notGreaterEq, greater: notGreater,
		notLess: less, notLessEqual: lessEqual, notGreaterEq: greaterEqual, notGreater: greater}[p]
}

// node is one operation of a kernel. Its value does not change.
type node struct {
	op    opcode
	args  []*node
	imm   int    // shift or predicate
	bits  uint64 // of a constant
	param int    // of a load, a store or a scalar
	off   int64
	dead  bool // a store that nobody needs

	// For the assembler.
	uses []int // positions of the operations that need it, in order
	reg  int   // register, or -1
	slot int   // stack slot, or -1
}

// key is the same for equal operations.
func (n *node) key() string {
	s := fmt.Sprint(n.op, n.imm, n.bits, n.param, n.off)
	for _, a := range n.args {
		s += fmt.Sprintf(" %p", a)
	}
	return s
}

// inMemory reports whether the value needs no register of its own, because it
// lies in memory for the whole loop.
func (n *node) inMemory() bool { return n.op == opConst || n.op == opScalar }
