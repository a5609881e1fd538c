// Package nk is part of photonledger.
package nk
