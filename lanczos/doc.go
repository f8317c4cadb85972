// Package lanczos finds the lowest eigenvalues and eigenvectors of Hermitian
// operators that are too large to write down as matrices: all it asks for is the
// product with a vector. Each level comes with its residual and an error bound, the
// list with the evidence that no level is missing from it.
//
//	op := lanczos.RealFunc(dim, product)              // product(dst, src) writes H·src
//	result, err := lanczos.Lowest(ctx, op, 4, nil)    // four levels
//	if err != nil { … }                               // result holds what was reached
//	fmt.Println(result)                               // evidence in three lines
//	energy, psi := result.Levels[0].Energy, result.Vectors[0]
//
// # What to know
//
// Energies are variational and good to rounding long before vectors are: with a
// residual r the error of an energy is about r²/gap, that of a vector r/gap, gap
// being the distance to other levels.
//
// Multiplets come with their full multiplicity, at the price of about one run for
// each further member. Resolve symmetries before, where they are known: sectors are
// smaller, and their levels rarely degenerate.
//
// Levels closer than Tolerance·‖H‖ cannot be told from a multiplet; a list that
// ends inside one says so in Result.CutMultiplet. Ask for one or two levels more then.
//
// "Complete" is a statement with a probability: Check tells which, and why.
//
// Only the lower end of the spectrum is offered. The highest levels are those of -H.
//
// # Reproducibility
//
// Start vectors come from Options.Seed, which the result repeats. All sums add
// blocks of 2048 components in fixed order, so results have the same bits for any
// number of workers on one kind of processor.
//
// # References
//
// C. Lanczos, J. Res. Natl. Bur. Stand. 45, 255 (1950); further ones at the
// functions and types that use them.
//
// This package imports lanczos/dense and basis/pages, which speaks of memory only; lanczostest
// checks operators for it.
package lanczos
