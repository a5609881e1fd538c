//go:build amd64 && !purego

package optics

import "golang.org/x/sys/cpu"

// vectorLanes is the number of lanes of a vector register.
const vectorLanes = 4

// hasVectors chooses between the vector instructions and their Go twins, which
// give the same bits.
var hasVectors = cpu.X86.HasAVX2
