// Package absorb is part of photonledger.
package absorb
