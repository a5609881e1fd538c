// Package absorb turns light inside an absorber into carriers.
package absorb
