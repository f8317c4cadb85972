package fence

import (
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"syscall"
)

// mostLinks bounds the links on one path.
const mostLinks = 40

var (
	errMissing = syscall.ENOENT
	errLinks   = errors.New("too many links")
)

// real follows a path link by link. What does not exist yet stays as it is. With
// last unset the last element is not followed, as for what acts on a link itself.
func (f *Fence) real(path string, last bool) (string, error) {
	if path == "" {
		return "", errMissing
	}
	if strings.ContainsRune(path, 0) {
		return "", syscall.EINVAL
	}
	if !filepath.IsAbs(path) {
		path = f.base + string(filepath.Separator) + path
	}
	volume := filepath.VolumeName(path)
	root := volume + string(filepath.Separator)
	done, todo := root, elements(path[len(volume):])
	for links := 0; len(todo) > 0; {
		element := todo[0]
		todo = todo[1:]
		if element == ".." {
			if info, err := os.Lstat(done); err == nil && !info.IsDir() {
				return "", syscall.ENOTDIR
			}
			done = filepath.Dir(done)
			continue
		}
		next := filepath.Join(done, element)
		info, err := os.Lstat(next)
		switch {
		case errors.Is(err, os.ErrNotExist):
			if slices.Contains(todo, "..") || strings.HasSuffix(path, string(filepath.Separator)+".") {
				return "", errMissing
			}
			return filepath.Join(append([]string{next}, todo...)...), nil
		case err != nil:
			return "", underlying(err)
		case info.Mode()&os.ModeSymlink == 0 || len(todo) == 0 && !last:
			done = next
			continue
		}
		if links++; links > mostLinks {
			return "", errLinks
		}
		target, err := os.Readlink(next)
		if err != nil {
			return "", underlying(err)
		}
		if filepath.IsAbs(target) {
			done = filepath.VolumeName(target) + string(filepath.Separator)
			target = target[len(filepath.VolumeName(target)):]
		}
		todo = append(elements(target), todo...)
	}
	if folderOnly(path) {
		if info, err := os.Stat(done); err == nil && !info.IsDir() {
			return "", syscall.ENOTDIR
		}
	}
	return done, nil
}

// folderOnly says that a path can only name a folder.
func folderOnly(path string) bool {
	_, end := filepath.Split(path)
	return end == "" || end == "." || end == ".."
}

// elements are the elements of a path without "" and ".".
func elements(path string) []string {
	var list []string
	for _, e := range strings.FieldsFunc(path, func(r rune) bool { return r < 0x80 && os.IsPathSeparator(uint8(r)) }) {
		if e != "." {
			list = append(list, e)
		}
	}
	return list
}

// underlying takes operation and path away.
func underlying(err error) error {
	var p *os.PathError
	if errors.As(err, &p) {
		return p.Err
	}
	return err
}

// spot is a path that is open to the script.
type spot struct {
	root *os.Root
	rel  string // in root
	real string
}

// find judges a path.
func (f *Fence) find(path string, access Access, last bool) (spot, error) {
	real, err := f.real(path, last)
	if err != nil {
		return spot{}, err
	}
	f.mutex.Lock()
	defer f.mutex.Unlock()
	for _, a := range f.areas {
		if a.access < access || !within(real, a.path) {
			continue
		}
		rel, err := filepath.Rel(a.path, real)
		if err != nil {
			return spot{}, err
		}
		return spot{a.root, filepath.Join(a.rel, rel), real}, nil
	}
	return spot{}, &Denied{real, access}
}

// Path judges a path for a function that opens it by itself and returns the path
// to give to that function: the same one if the program is in the script's
// current folder, or an absolute one.
//
// Errors: an *os.PathError with the operation and the path as given; around a
// *Denied if the path is outside.
func (f *Fence) Path(op, path string, access Access) (string, error) {
	s, err := f.find(path, access, true)
	if err != nil {
		return "", &os.PathError{Op: op, Path: path, Err: err}
	}
	return f.outward(path, s), nil
}

// outward is the path for a function of the program.
func (f *Fence) outward(path string, s spot) string {
	if filepath.IsAbs(path) || f.here() {
		return path
	}
	return s.real
}

// here says that the script's current folder is that of the program.
func (f *Fence) here() bool {
	now, err := os.Getwd()
	return err == nil && now == f.base
}
