// Package repository holds the rules of this repository as tests: which folder
// may import what, what the comment of a calculation must say, that every row
// of data names its source, and what may stand at the top level.
//
// Each rule is a function over a file tree that returns what it found wrong, so
// that a test can feed it a deliberate fault and see it fail.
package repository
