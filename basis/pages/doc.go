// Package pages makes long slices whose entries are read in no order, such as
// vectors and tables, and asks the system for large pages for them.
//
//	x := pages.Floats(1 << 24)       // a vector of 128 MiB, all zero
//	z := pages.Complexes(1 << 24)
//	pages.Advise(table)              // the same for a slice of another type
//
// With pages of 4 KiB nearly every access to such a slice waits for the table of
// pages as well; with pages of 2 MiB a product with a matrix of 6e8 elements took
// half the time (measured on Linux, two cores). It is a hint: a system that does
// not know it, or slices below 4 MiB, change nothing.
//
// # Arrows
//
// This package imports nothing of Ketloom.
package pages
