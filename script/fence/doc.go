// Package fence keeps a script to the files it is given: it says which paths may
// be read or written, and has functions in place of those of package os that
// obey.
//
//	f, err := fence.New(fence.Options{Folder: "study", Read: []string{"/data"}})
//	defer f.Close()
//	path, err := f.Path("open", "../secret", fence.Read) // *os.PathError around *Denied
//	b, err := f.Functions()["os.ReadFile"].(func(string) ([]byte, error))("notes.txt")
//
// A path is followed link by link before it is judged, so a link inside a folder
// that leads out of it is outside. The functions in place of package os then
// open through os.Root, which looks again while it opens. Functions that take a
// path and open it themselves (Path is for them, CreateTemp, MkdirTemp, Walk,
// WalkDir and Glob too) are checked before the call only: a folder that holds
// links leading out of it, and a script that moves them about while it opens,
// can get past that. Hard links that lead out are not seen.
//
// The package may import nothing of Ketloom.
package fence
