// Package host is how a script hands values to the Go program that runs it.
//
//	host.Return("energy", result.Levels[0].Energy)
//
// The program gets them through script.Options.Return. Under the command, and in
// a compiled script, Return does nothing, so one script serves everywhere.
//
// The package may import nothing of Ketloom.
package host
