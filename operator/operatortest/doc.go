// Package operatortest gives tests of operators their yardstick: dense matrices
// built by Kronecker products straight from the definitions, and random
// operators.
//
//	want := operatortest.Dense(op)            // all product states, ascending
//	op := operatortest.Random(rng, space, 6, 3)
//
// It shares no code with the algebra or with the products of package matrix.
// Cost: the square of the number of product states; meant for at most a
// thousand or two.
//
// # Arrows
//
// This package may import operator and basis.
package operatortest
