// Package matrix turns an operator of the algebra into a matrix over the states
// of a basis, stored or computed on the fly, square or from one sector into
// another.
//
//	plan, err := matrix.Estimate(h, b, nil)      // before anything is allocated
//	fmt.Println(plan)
//	m, err := matrix.New(ctx, h, b, nil)         // checks that h keeps the sector
//	m.Apply(dst, src)                            // dst = H src, real sectors
//	m.ApplyComplex(dst, src)                     // any sector
//
// Before a matrix is made, the operator is proved by the algebra to conserve the
// charges of the basis and to commute with its symmetries. The matrix is real
// where the algebra and the sector allow it, complex otherwise.
//
// # Forms
//
// The stored form keeps, for each element of a row in ascending column order, a
// 32-bit column (64-bit beyond 2^32 states) and a code of one or two bytes into
// the table of distinct values; a matrix with more than 65,536 distinct values
// keeps the values themselves. Diagonal elements are kept apart as one number a
// row. The form on the fly keeps only the compiled terms and computes a row each
// time. Both give the same numbers, rows are shared out between goroutines, and
// the result does not depend on how many there are.
//
// # Caveats
//
// Constraints of a basis are not checked against the operator: what leads out
// of the constrained space is projected away. This is the usual meaning of a
// blockaded or t-J Hamiltonian.
//
// # Arrows
//
// This package may import operator, basis and basis/group.
package matrix
