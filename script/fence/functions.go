package fence

import (
	"io/fs"
	"os"
	"path/filepath"
)

// Functions returns what a script gets in place of the functions of the same
// name, by import path and name. Errors have the operation and the path that
// package os would report; f.Name() is the name as given, but for folders where
// the script's current folder is not the program's.
func (f *Fence) Functions() map[string]any {
	list := map[string]any{
		"os.Open": f.open, "os.Create": f.create, "os.OpenFile": f.openFile,
		"os.ReadFile": f.readFile, "os.WriteFile": f.writeFile, "os.ReadDir": f.readDir,
		"os.Stat": f.stat, "os.Lstat": f.lstat, "os.Readlink": f.readlink,
		"os.Mkdir": f.mkdir, "os.MkdirAll": f.mkdirAll, "os.Remove": f.remove, "os.RemoveAll": f.removeAll,
		"os.Rename": f.rename, "os.Link": f.link, "os.Symlink": f.symlink,
		"os.Truncate": f.truncate, "os.Chmod": f.chmod, "os.Chtimes": f.chtimes,
		"os.CreateTemp": f.createTemp, "os.MkdirTemp": f.mkdirTemp, "os.TempDir": f.tempDir,
		"os.DirFS": f.dirFS, "os.OpenRoot": f.openRoot, "os.OpenInRoot": f.openInRoot,
		"os.Getwd": func() (string, error) { return f.base, nil },

		"path/filepath.Abs":          f.abs,
		"path/filepath.EvalSymlinks": f.evalSymlinks,
		"path/filepath.Glob":         f.glob,
		"path/filepath.Walk":         f.walk,
		"path/filepath.WalkDir":      f.walkDir,
	}
	if !f.env {
		for name, fun := range environment() {
			list[name] = fun
		}
	}
	return list
}

// folder is the folder for a temporary file.
func (f *Fence) folder(op, dir string) (string, error) {
	if dir == "" {
		return f.tempFolder()
	}
	return f.Path(op, dir, Write)
}

func (f *Fence) createTemp(dir, pattern string) (*os.File, error) {
	folder, err := f.folder("createtemp", dir)
	if err != nil {
		return nil, err
	}
	return os.CreateTemp(folder, pattern)
}

func (f *Fence) mkdirTemp(dir, pattern string) (string, error) {
	folder, err := f.folder("mkdirtemp", dir)
	if err != nil {
		return "", err
	}
	return os.MkdirTemp(folder, pattern)
}

// tempDir is a folder of the run alone. Where none can be made it names a path
// that is not open.
func (f *Fence) tempDir() string {
	folder, err := f.tempFolder()
	if err != nil {
		return os.TempDir()
	}
	return folder
}

func (f *Fence) abs(path string) (string, error) {
	if filepath.IsAbs(path) {
		return filepath.Clean(path), nil
	}
	return filepath.Join(f.base, path), nil
}

func (f *Fence) evalSymlinks(path string) (string, error) {
	out, err := f.Path("lstat", path, Read)
	if err != nil {
		return "", err
	}
	return filepath.EvalSymlinks(out)
}

// glob leaves out what is not open to the script.
func (f *Fence) glob(pattern string) ([]string, error) {
	prefix := ""
	if !filepath.IsAbs(pattern) && !f.here() {
		prefix = f.base + string(filepath.Separator)
	}
	matches, err := filepath.Glob(escaped(prefix) + pattern)
	var list []string
	for _, m := range matches {
		if _, err := f.find(m, Read, false); err == nil {
			list = append(list, m[len(prefix):])
		}
	}
	return list, err
}

// escaped takes a path literally in a pattern.
func escaped(path string) string {
	var out []rune
	for _, r := range path {
		switch r {
		case '*', '?', '[', '\\':
			if filepath.Separator != '\\' {
				out = append(out, '\\')
			}
		}
		out = append(out, r)
	}
	return string(out)
}

func (f *Fence) walk(root string, do filepath.WalkFunc) error {
	out, err := f.Path("lstat", root, Read)
	if err != nil {
		return do(root, nil, err)
	}
	return filepath.Walk(out, func(path string, info os.FileInfo, err error) error {
		return do(inward(root, out, path), info, err)
	})
}

func (f *Fence) walkDir(root string, do fs.WalkDirFunc) error {
	out, err := f.Path("lstat", root, Read)
	if err != nil {
		return do(root, nil, err)
	}
	return filepath.WalkDir(out, func(path string, d fs.DirEntry, err error) error {
		return do(inward(root, out, path), d, err)
	})
}

// inward turns a path below out into one below root.
func inward(root, out, path string) string {
	if root == out {
		return path
	}
	rel, err := filepath.Rel(out, path)
	if err != nil || rel == "." {
		return root
	}
	return filepath.Join(root, rel)
}
