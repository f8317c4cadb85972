package main

import (
	"fmt"
	"runtime"
	"runtime/debug"
)

// version prints the version of the module and of Go.
func version() int {
	v, revision := "development", ""
	if info, ok := debug.ReadBuildInfo(); ok {
		if info.Main.Version != "" && info.Main.Version != "(devel)" {
			v = info.Main.Version
		}
		for _, s := range info.Settings {
			if s.Key == "vcs.revision" && len(s.Value) >= 12 {
				revision = " " + s.Value[:12]
			}
		}
	}
	fmt.Printf("ketloom %s%s (%s, %s/%s)\n", v, revision, runtime.Version(), runtime.GOOS, runtime.GOARCH)
	return exitOK
}
