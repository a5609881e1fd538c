// Package photonledger accounts for every photon that falls on a solar cell.
package photonledger
