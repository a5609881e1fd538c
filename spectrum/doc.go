// Package spectrum is part of photonledger.
package spectrum
