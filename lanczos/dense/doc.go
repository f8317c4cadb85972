// Package dense finds complete spectra of small matrices: all eigenvalues and
// eigenvectors of real symmetric and complex Hermitian matrices, and all
// singular values of real and complex rectangular matrices.
//
//	a := []float64{2, 1, 1, 2}                          // row after row
//	values, vectors, err := dense.EigenReal(a, 2, true) // 1 and 3
//	if err != nil { … }
//	v := vectors[2:4]                                   // eigenvector of values[1]
//	s, err := dense.SingularReal(a, 2, 2)               // 3 and 1
//
// # Shapes
//
// A matrix is one slice, row after row: element (i, j) of a matrix with c
// columns is a[i*c+j]. Eigenvectors come vector after vector: vector j is
// vectors[j*n:(j+1)*n]. Inputs are never modified, results belong to the caller.
//
// # Accuracy
//
// Every method here is a chain of orthogonal or unitary transformations, so the
// error of each eigenvalue is a small multiple of ε‖A‖ and the error of each
// singular value a small multiple of ε·s_max, with ε = 2⁻⁵². These errors are
// absolute. A singular value s << s_max has the relative error ε·s_max/s; in an
// entanglement spectrum the level ξ = -ln s² has the error 2ε·s_max/s, and values
// below about 1e-15·s_max (ξ more than 69 above the lowest level) are rounding.
// Squaring a matrix first would lose half of these digits, hence SingularReal and
// SingularComplex never form A†A.
//
// # Caveats
//
// The cost is O(n³) and the memory about five n×n matrices (complex, with
// vectors). A matrix of 1000 rows takes seconds, of 2000 rows most of a minute at
// worst; for a few levels of something larger use package lanczos.
//
// The bits of a result depend neither on the number of processors nor on the load
// of the machine, and eigenvalues are the same with vectors and without.
//
// # References
//
// A. S. Householder, J. ACM 5, 339 (1958), reduction by reflections;
// G. H. Golub and W. Kahan, SIAM J. Numer. Anal. B 2, 205 (1965), bidiagonal form;
// A. Dubrulle, R. S. Martin and J. H. Wilkinson, Numer. Math. 12, 377 (1968),
// implicit QL; R. Schreiber and C. Van Loan, SIAM J. Sci. Stat. Comput. 10, 53
// (1989), products of reflections in blocks; K. V. Fernando and B. N. Parlett,
// Numer. Math. 67, 191 (1994), singular values of a bidiagonal matrix.
//
// This package imports no other package of the module.
package dense
