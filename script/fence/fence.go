package fence

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
)

// Access is what is done with a path.
type Access int

// Write includes Read.
const (
	Read Access = iota
	Write
)

// String is the word for messages and flags.
func (a Access) String() string {
	if a == Write {
		return "write"
	}
	return "read"
}

// Options say what is inside.
type Options struct {
	// Folder is the script's current folder, open for reading and writing; ""
	// means the current folder of the program.
	Folder string
	// NoFiles closes Folder; relative paths still start there.
	NoFiles bool
	// Read and Write are further files and folders. Those to read must exist.
	Read, Write []string
	// Env shows the environment.
	Env bool
}

// Fence decides about paths. It is used by any number of goroutines.
type Fence struct {
	base  string // the script's current folder
	env   bool
	mutex sync.Mutex
	areas []*area
	temp  string // the script's folder for temporary files, once it asked for it
	roots []*os.Root
}

// area is a folder or file that is open to the script.
type area struct {
	path   string // without links
	access Access
	root   *os.Root // of path, or of the nearest folder that holds it
	rel    string   // of path in root
}

// New opens the folders of o.
//
// Errors: a folder or file of o that does not exist or cannot be opened.
func New(o Options) (*Fence, error) {
	base, err := filepath.Abs(o.Folder) // "" is the current folder
	if err != nil {
		return nil, fmt.Errorf("fence: %w", err)
	}
	f := &Fence{base: base, env: o.Env}
	if info, err := os.Stat(base); err != nil {
		return nil, fmt.Errorf("fence: the folder of the script: %w", err)
	} else if !info.IsDir() {
		return nil, fmt.Errorf("fence: the folder of the script: %s is a file; name a folder", base)
	}
	if !o.NoFiles {
		err = f.add(base, Write)
	}
	for _, p := range o.Write {
		err = errors.Join(err, f.add(p, Write))
	}
	for _, p := range o.Read {
		err = errors.Join(err, f.add(p, Read))
	}
	if err != nil {
		_ = f.Close()
		return nil, err
	}
	return f, nil
}

// add opens an area. What may be written need not exist.
func (f *Fence) add(path string, access Access) error {
	abs, err := filepath.Abs(path)
	if err != nil {
		return fmt.Errorf("fence: %w", err)
	}
	real, err := f.real(abs, true)
	if err != nil {
		return fmt.Errorf("fence: %s: %w", path, err)
	}
	if _, err := os.Stat(real); err != nil && access == Read {
		return fmt.Errorf("fence: %w; give a file or folder that exists", err)
	}
	folder := real
	for {
		info, err := os.Stat(folder)
		if err == nil && info.IsDir() || folder == filepath.Dir(folder) {
			break
		}
		folder = filepath.Dir(folder)
	}
	a := &area{path: real, access: access}
	if a.rel, err = filepath.Rel(folder, real); err != nil {
		return fmt.Errorf("fence: %w", err)
	}
	if a.root, err = os.OpenRoot(folder); err != nil {
		return fmt.Errorf("fence: %w", err)
	}
	f.mutex.Lock()
	defer f.mutex.Unlock()
	f.areas = append(f.areas, a)
	f.roots = append(f.roots, a.root)
	return nil
}

// keep closes r with the fence.
func (f *Fence) keep(r *os.Root) *os.Root {
	f.mutex.Lock()
	defer f.mutex.Unlock()
	f.roots = append(f.roots, r)
	return r
}

// Close closes the folders and removes the script's temporary files.
func (f *Fence) Close() error {
	f.mutex.Lock()
	defer f.mutex.Unlock()
	var err error
	for _, r := range f.roots {
		err = errors.Join(err, r.Close())
	}
	if f.temp != "" {
		err = errors.Join(err, os.RemoveAll(f.temp))
	}
	f.roots, f.areas, f.temp = nil, nil, ""
	return err
}

// Folder is the script's current folder, an absolute path.
func (f *Fence) Folder() string { return f.base }

// tempFolder makes the folder for temporary files at its first use.
func (f *Fence) tempFolder() (string, error) {
	f.mutex.Lock()
	have := f.temp
	f.mutex.Unlock()
	if have != "" {
		return have, nil
	}
	folder, err := os.MkdirTemp("", "ketloom-")
	if err != nil {
		return "", err
	}
	if err := f.add(folder, Write); err != nil {
		return "", errors.Join(err, os.Remove(folder))
	}
	f.mutex.Lock()
	defer f.mutex.Unlock()
	if f.temp != "" { // another goroutine was first
		return f.temp, os.Remove(folder)
	}
	f.temp = folder
	return folder, nil
}

// within says that path is folder or lies in it.
func within(path, folder string) bool {
	if path == folder {
		return true
	}
	if !strings.HasSuffix(folder, string(filepath.Separator)) {
		folder += string(filepath.Separator)
	}
	return strings.HasPrefix(path, folder)
}
