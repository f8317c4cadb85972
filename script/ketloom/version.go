package main

import (
	"fmt"
	"runtime"
	"runtime/debug"

	"ketloom/lanczos/archive"
)

// version prints the version of Ketloom, the commit if it is known, and the version
// of Go.
func version() int {
	revision := ""
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, s := range info.Settings {
			if s.Key == "vcs.revision" && len(s.Value) >= 12 {
				revision = " " + s.Value[:12]
			}
		}
	}
	fmt.Printf("%s%s (%s, %s/%s)\n", archive.Program, revision, runtime.Version(), runtime.GOOS, runtime.GOARCH)
	return exitOK
}
