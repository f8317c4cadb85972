// Package manual holds the public documentation of every package that scripts may
// import, so that the command can show it where there is no Go tool.
//
//	text, err := manual.Page("lanczos.Lowest")
//	text, err = manual.Page("basis")          // a package, with a line for each name
//	names := manual.Packages()
//
// The pages are generated from the doc comments by
//
//	go generate ./script/manual
//
// and a test fails while they are stale.
//
// # Arrows
//
// This package imports no other package of Ketloom.
package manual

//go:generate go run ./generate
