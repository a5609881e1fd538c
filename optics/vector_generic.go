//go:build !amd64 || purego

package optics

const vectorLanes = 1
