package main

import (
	"bytes"
	"fmt"
	"go/types"
)

const (
	registers = 15 // Y0..Y14
	flagReg   = 15 // Y15 collects the flag
	laneBytes = 32 // of four lanes
	never     = 1 << 30
)

// pointers are the registers that hold the parameters; R14 and R15 belong to
// the runtime, R12 to the stack slots, R13 and CX to the loop.
var pointers = []string{"AX", "BX", "DX", "SI", "DI", "R8", "R9", "R10", "R11"}

// constants collects the constants of all kernels.
type constants struct {
	index map[uint64]int
	list  []uint64
}

func (c *constants) address(bits uint64) string {
	i, ok := c.index[bits]
	if !ok {
		i = len(c.list)
		c.index[bits] = i
		c.list = append(c.list, bits)
	}
	return fmt.Sprintf("constants<>+%d(SB)", i*laneBytes)
}

func (c *constants) write(w *bytes.Buffer) {
	for i, bits := range c.list {
		for lane := range 4 {
			fmt.Fprintf(w, "DATA constants<>+%d(SB)/8, $0x%016x\n", i*laneBytes+8*lane, bits)
		}
	}
	fmt.Fprintf(w, "GLOBL constants<>(SB), RODATA|NOPTR, $%d\n", len(c.list)*laneBytes)
}

// assembler gives registers to the operations in their order. When none is
// free, the value whose next use is furthest away goes to the stack (L. A.
// Belady, IBM Systems Journal 5, 78 (1966)).
type assembler struct {
	*tracer
	pool    *constants
	body    bytes.Buffer
	pos     int
	file    [registers]*node // what the registers hold
	slots   []*node          // what the stack slots hold
	scalars map[*node]int    // their slots
	base    map[int]string   // pointer registers of the parameters
}

// assemble writes the kernel as a Go assembly function.
func (t *tracer) assemble(w *bytes.Buffer, pool *constants) {
	a := &assembler{tracer: t, pool: pool, scalars: map[*node]int{}, base: map[int]string{}}
	for i, n := range t.ops {
		n.reg, n.slot = -1, -1
		for _, arg := range n.args {
			arg.uses = append(arg.uses, i)
		}
	}
	var setup bytes.Buffer
	offsets, frame := t.frame()
	for i, v := range t.params {
		if isPointer(v.Type()) {
			a.base[i] = pointers[len(a.base)]
			fmt.Fprintf(&setup, "\tMOVQ %s+%d(FP), %s\n", v.Name(), offsets[i], a.base[i])
		}
	}
	for _, n := range t.ops {
		if n.op == opScalar {
			a.scalars[n] = len(a.slots)
			a.slots = append(a.slots, n)
			fmt.Fprintf(&setup, "\tVBROADCASTSD %s+%d(FP), Y0\n\tVMOVUPD Y0, %d(R12)\n", t.params[n.param].Name(), offsets[n.param], a.scalars[n]*laneBytes)
		}
	}
	for i, n := range t.ops {
		a.pos = i
		a.emit(n)
	}
	stack := 0
	if len(a.slots) > 0 {
		stack = (len(a.slots) + 1) * laneBytes
	}
	fmt.Fprintf(w, "// %s on four lanes at a time: %d operations, %d stack slots.\n", t.name, len(t.ops), len(a.slots))
	fmt.Fprintf(w, "TEXT ·%s(SB), NOSPLIT, $%d-%d\n", t.vectorName(), stack, frame)
	if stack > 0 {
		fmt.Fprintf(w, "\tLEAQ %d(SP), R12\n\tANDQ $~%d, R12\n", laneBytes-1, laneBytes-1)
	}
	w.Write(setup.Bytes())
	fmt.Fprintf(w, "\tMOVQ groups+%d(FP), CX\n\tSHLQ $5, CX\n\tXORQ R13, R13\n", offsets[len(t.params)])
	if t.flagged {
		fmt.Fprintf(w, "\tVXORPD Y%d, Y%d, Y%d\n", flagReg, flagReg, flagReg)
	}
	fmt.Fprintf(w, "\tPCALIGN $32\nloop:\n")
	w.Write(a.body.Bytes())
	fmt.Fprintf(w, "\tADDQ $%d, R13\n\tCMPQ R13, CX\n\tJLT loop\n", laneBytes)
	if t.flagged {
		fmt.Fprintf(w, "\tVMOVMSKPD Y%d, AX\n\tTESTL AX, AX\n\tSETNE ret+%d(FP)\n", flagReg, offsets[len(t.params)+1])
	}
	fmt.Fprintf(w, "\tVZEROUPPER\n\tRET\n\n")
}

func isPointer(t types.Type) bool {
	switch t.Underlying().(type) {
	case *types.Pointer, *types.Slice:
		return true
	}
	return false
}

// frame returns the offsets of the parameters of the assembly function, then
// those of groups and of the result, and the size of all.
func (t *tracer) frame() (offsets []int, size int) {
	at := 0
	for _, v := range t.params {
		offsets = append(offsets, at)
		if isPointer(v.Type()) || isFloat(v.Type()) {
			at += 8
		}
	}
	offsets = append(offsets, at, at+8)
	at += 8
	if t.flagged {
		at++
	}
	return offsets, at
}

func (a *assembler) line(format string, args ...any) {
	fmt.Fprintf(&a.body, "\t"+format+"\n", args...)
}

// next returns the position of the next use of n after the current one.
func (n *node) next(pos int) int {
	for _, u := range n.uses {
		if u > pos {
			return u
		}
	}
	return never
}

// emit writes one operation.
func (a *assembler) emit(n *node) {
	switch n.op {
	case opConst, opScalar:
		return
	case opLoad:
		if !a.folds(n) {
			a.line("VMOVUPD %s, Y%d", a.address(n), a.take(n))
		}
		return
	case opStore:
		r := a.register(n.args[0])
		a.line("VMOVUPD Y%d, %s", r, a.address(n))
	case opFlag:
		a.line("VORPD %s, Y%d, Y%d", a.operand(n.args[0]), flagReg, flagReg)
	case opSqrt:
		x := a.operand(n.args[0])
		a.release(n)
		a.line("VSQRTPD %s, Y%d", x, a.take(n))
	case opShift:
		x := a.register(n.args[0])
		a.release(n)
		a.line("VPSLLQ $%d, Y%d, Y%d", n.imm, x, a.take(n))
	case opChoose:
		mask, no := a.register(n.args[0]), a.register(n.args[2])
		yes := a.operand(n.args[1])
		a.release(n)
		a.line("VBLENDVPD Y%d, %s, Y%d, Y%d", mask, yes, no, a.take(n))
	default:
		a.emitBinary(n)
	}
	a.release(n)
	a.releaseSlots(n)
}

func (a *assembler) emitBinary(n *node) {
	x, y := n.args[0], n.args[1]
	if commutes[n.op] && x.reg < 0 && y.reg >= 0 {
		x, y = y, x
	}
	rx := a.register(x)
	oy := a.operand(y)
	a.release(n)
	if n.op == opCompare {
		a.line("VCMPPD $0x%x, %s, Y%d, Y%d", n.imm, oy, rx, a.take(n))
		return
	}
	a.line("%s %s, Y%d, Y%d", mnemonics[n.op], oy, rx, a.take(n))
}

// folds reports whether a load can be the memory operand of the only operation
// that needs it: the second one, and no store in between.
func (a *assembler) folds(n *node) bool {
	if len(n.uses) != 1 {
		return false
	}
	user := a.ops[n.uses[0]]
	if len(user.args) != 2 || user.args[0] == n && (!commutes[user.op] || user.args[1].inMemory() || user.args[1].op == opLoad) {
		return false
	}
	for _, between := range a.ops[a.pos:n.uses[0]] {
		if between.op == opStore {
			return false
		}
	}
	return true
}

// address is the memory of a load or a store.
func (a *assembler) address(n *node) string {
	if n.off == 0 {
		return fmt.Sprintf("(%s)(R13*1)", a.base[n.param])
	}
	return fmt.Sprintf("%d(%s)(R13*1)", n.off, a.base[n.param])
}

// operand is n as a register or memory operand.
func (a *assembler) operand(n *node) string {
	switch {
	case n.reg >= 0:
		return fmt.Sprintf("Y%d", n.reg)
	case n.op == opConst:
		return a.pool.address(n.bits)
	case n.op == opScalar:
		return fmt.Sprintf("%d(R12)", a.scalars[n]*laneBytes)
	case n.slot >= 0:
		return fmt.Sprintf("%d(R12)", n.slot*laneBytes)
	case n.op == opLoad:
		return a.address(n)
	}
	panic("value is lost")
}

// register brings n into a register.
func (a *assembler) register(n *node) int {
	if n.reg >= 0 {
		return n.reg
	}
	from := a.operand(n)
	a.line("VMOVUPD %s, Y%d", from, a.take(n))
	return n.reg
}

// take gives n a register.
func (a *assembler) take(n *node) int {
	best, far := -1, -1
	for r, held := range a.file {
		if held == nil {
			best = r
			break
		}
		if a.needed(held) {
			continue
		}
		if next := held.next(a.pos); next > far {
			best, far = r, next
		}
	}
	if held := a.file[best]; held != nil {
		if !held.inMemory() && held.slot < 0 {
			held.slot = a.freeSlot(held)
			a.line("VMOVUPD Y%d, %d(R12)", best, held.slot*laneBytes)
		}
		held.reg = -1
	}
	a.file[best], n.reg = n, best
	return best
}

// needed reports whether the current operation reads n.
func (a *assembler) needed(n *node) bool {
	for _, arg := range a.ops[a.pos].args {
		if arg == n {
			return true
		}
	}
	return false
}

func (a *assembler) freeSlot(n *node) int {
	for i, held := range a.slots {
		if held == nil {
			a.slots[i] = n
			return i
		}
	}
	a.slots = append(a.slots, n)
	return len(a.slots) - 1
}

// release frees the registers of the operands that are not needed any more, so
// that the result can take one of them.
func (a *assembler) release(n *node) {
	for _, arg := range n.args {
		if arg.reg >= 0 && arg.next(a.pos) == never {
			a.file[arg.reg], arg.reg = nil, -1
		}
	}
}

// releaseSlots does so for the stack, when the operation has been written.
func (a *assembler) releaseSlots(n *node) {
	for _, arg := range n.args {
		if arg.slot >= 0 && arg.next(a.pos) == never {
			a.slots[arg.slot], arg.slot = nil, -1
		}
	}
}
