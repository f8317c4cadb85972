// Package progress shows on a terminal how far a long calculation is, through
// the hook that all options of Ketloom have.
//
//	show := progress.Terminal(os.Stderr)
//	defer show.Close()
//	b, err := basis.New(ctx, space, sector, &basis.Options{Progress: show.Report})
//
// Where the file is no terminal nothing is written at all, so that a script need
// not ask. It works the same in a compiled program and in a script.
//
// The package may import nothing of Ketloom.
package progress
