// Package optics is part of photonledger.
package optics
