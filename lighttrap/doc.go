// Package lighttrap is part of photonledger.
package lighttrap
