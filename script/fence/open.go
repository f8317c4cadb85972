package fence

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"syscall"
)

const writing = os.O_WRONLY | os.O_RDWR | os.O_CREATE | os.O_TRUNC | os.O_APPEND

// fault gives an error the operation and the path that the script knows.
func fault(op, path string, err error) error {
	if err == nil {
		return nil
	}
	return &os.PathError{Op: op, Path: path, Err: underlying(err)}
}

func (f *Fence) openFile(name string, flag int, perm os.FileMode) (*os.File, error) {
	if name == os.DevNull {
		return os.OpenFile(name, flag, perm)
	}
	access := Read
	if flag&writing != 0 {
		access = Write
	}
	s, err := f.find(name, access, true)
	if err != nil {
		return nil, fault("open", name, err)
	}
	if flag&os.O_CREATE != 0 && folderOnly(name) {
		return nil, fault("open", name, syscall.EISDIR)
	}
	file, err := s.root.OpenFile(s.rel, flag, perm)
	if err != nil {
		return nil, fault("open", name, err)
	}
	return named(file, f.shown(file, name, s))
}

// shown is the name that an opened file gets. Entries of a folder are found by
// its name, so that must hold for the program.
func (f *Fence) shown(file *os.File, name string, s spot) string {
	if info, err := file.Stat(); err == nil && info.IsDir() {
		return f.outward(name, s)
	}
	return name
}

func (f *Fence) open(name string) (*os.File, error) { return f.openFile(name, os.O_RDONLY, 0) }

func (f *Fence) create(name string) (*os.File, error) {
	return f.openFile(name, os.O_RDWR|os.O_CREATE|os.O_TRUNC, 0o666)
}

func (f *Fence) readFile(name string) ([]byte, error) {
	file, err := f.open(name)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	info, err := file.Stat()
	if err != nil {
		return nil, fault("read", name, err)
	}
	b := make([]byte, 0, max(info.Size(), 0)+512)
	for {
		n, err := file.Read(b[len(b):cap(b)])
		b = b[:len(b)+n]
		switch {
		case err == nil:
			b = slices.Grow(b, 512)
		case errors.Is(err, io.EOF):
			return b, nil
		default:
			return b, err
		}
	}
}

func (f *Fence) writeFile(name string, data []byte, perm os.FileMode) error {
	file, err := f.openFile(name, os.O_WRONLY|os.O_CREATE|os.O_TRUNC, perm)
	if err != nil {
		return err
	}
	_, err = file.Write(data)
	return errors.Join(err, file.Close())
}

func (f *Fence) readDir(name string) ([]os.DirEntry, error) {
	file, err := f.open(name)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	list, err := file.ReadDir(-1)
	slices.SortFunc(list, func(a, b os.DirEntry) int { return strings.Compare(a.Name(), b.Name()) })
	return list, err
}

func (f *Fence) stat(name string) (os.FileInfo, error) {
	if name == os.DevNull {
		return os.Stat(name)
	}
	return f.info("stat", name, true, (*os.Root).Stat)
}

func (f *Fence) lstat(name string) (os.FileInfo, error) {
	return f.info("lstat", name, folderOnly(name), (*os.Root).Lstat)
}

func (f *Fence) info(op, name string, last bool, look func(*os.Root, string) (os.FileInfo, error)) (os.FileInfo, error) {
	s, err := f.find(name, Read, last)
	if err != nil {
		return nil, fault(op, name, err)
	}
	info, err := look(s.root, s.rel)
	if err != nil {
		return nil, fault(op, name, err)
	}
	if base := filepath.Base(name); info.Name() != base {
		return titled{info, base}, nil
	}
	return info, nil
}

// titled is a FileInfo with the name that was asked for.
type titled struct {
	os.FileInfo
	name string
}

func (t titled) Name() string { return t.name }

// closed is the file system of a folder that is not open to the script.
type closed struct{ err error }

func (c closed) Open(name string) (fs.File, error) { return nil, c.err }

func (f *Fence) dirFS(name string) fs.FS {
	s, err := f.find(name, Read, true)
	if err != nil {
		return closed{fault("open", name, err)}
	}
	r, err := s.root.OpenRoot(s.rel)
	if err != nil {
		return closed{fault("open", name, err)}
	}
	return f.keep(r).FS()
}

func (f *Fence) openRoot(name string) (*os.Root, error) {
	s, err := f.find(name, Write, true) // an os.Root writes, too
	if err != nil {
		return nil, fault("open", name, err)
	}
	r, err := s.root.OpenRoot(s.rel)
	return r, fault("open", name, err)
}

func (f *Fence) openInRoot(dir, name string) (*os.File, error) {
	s, err := f.find(dir, Read, true)
	if err != nil {
		return nil, fault("open", dir, err)
	}
	r, err := s.root.OpenRoot(s.rel)
	if err != nil {
		return nil, fault("open", dir, err)
	}
	defer r.Close()
	return r.Open(name)
}
