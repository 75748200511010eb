// Package data holds the tables that batchwright carries with it: part
// families, bench instruments and a demonstration price book. It exposes the
// files as they are and knows nothing of what is in them.
package data

import "embed"

// Families is families.yaml: part families typical of their class, with a
// source for every figure.
//
//go:embed families.yaml
var Families []byte

// Instruments is instruments.yaml: bench instruments typical of their class.
//
//go:embed instruments.yaml
var Instruments []byte

// Prices is prices.csv. Every price in it is invented for demonstration.
//
//go:embed prices.csv
var Prices []byte

// Examples holds the example builds, one file each. Everything in them is
// invented.
//
//go:embed examples
var Examples embed.FS
