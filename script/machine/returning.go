package machine

import (
	"maps"
	"os"

	"ketloom/script/progress"
)

// hosted are the functions that reach the program around the script.
func (r *Run) hosted() map[string]any {
	list := map[string]any{
		"ketloom/script/host.Return": func(name string, value any) {
			if r.Return != nil {
				r.Return(name, value)
			}
		},
	}
	maps.Copy(list, r.Bound)
	if r.Quiet {
		list["ketloom/script/progress.Terminal"] = func(*os.File) *progress.Display { return progress.Terminal(nil) }
	}
	return list
}
