package fence

import (
	"os"
	"path/filepath"
	"strings"
	"time"
)

// change judges a path that is changed and does so.
func (f *Fence) change(op, name string, last bool, do func(s spot) error) error {
	s, err := f.find(name, Write, last)
	if err == nil {
		err = do(s)
	}
	return fault(op, name, err)
}

func (f *Fence) mkdir(name string, perm os.FileMode) error {
	return f.change("mkdir", name, false, func(s spot) error { return s.root.Mkdir(s.rel, perm) })
}

func (f *Fence) mkdirAll(name string, perm os.FileMode) error {
	return f.change("mkdir", name, true, func(s spot) error {
		if s.rel == "." {
			return nil
		}
		return s.root.MkdirAll(s.rel, perm)
	})
}

func (f *Fence) remove(name string) error {
	return f.change("remove", name, false, func(s spot) error { return s.root.Remove(s.rel) })
}

func (f *Fence) removeAll(name string) error {
	if name == "" {
		return nil // as package os
	}
	if strings.HasSuffix(name, ".") && filepath.Base(name) == "." {
		return os.RemoveAll(name) // refused by package os itself
	}
	return f.change("unlinkat", name, false, func(s spot) error { return s.root.RemoveAll(s.rel) })
}

func (f *Fence) truncate(name string, size int64) error {
	return f.change("truncate", name, true, func(s spot) error {
		file, err := s.root.OpenFile(s.rel, os.O_WRONLY, 0)
		if err != nil {
			return err
		}
		defer file.Close()
		return file.Truncate(size)
	})
}

func (f *Fence) chmod(name string, mode os.FileMode) error {
	return f.change("chmod", name, true, func(s spot) error { return s.root.Chmod(s.rel, mode) })
}

func (f *Fence) chtimes(name string, atime, mtime time.Time) error {
	return f.change("chtimes", name, true, func(s spot) error { return s.root.Chtimes(s.rel, atime, mtime) })
}

func (f *Fence) readlink(name string) (string, error) {
	s, err := f.find(name, Read, false)
	if err != nil {
		return "", fault("readlink", name, err)
	}
	target, err := s.root.Readlink(s.rel)
	return target, fault("readlink", name, err)
}

// pair does what concerns two paths of one area. Both are changed: a hard link
// would let the script write what it may only read.
func (f *Fence) pair(op, from, to string, do func(r *os.Root, from, to string) error) error {
	a, err := f.find(from, Write, false)
	var b spot
	if err == nil {
		b, err = f.find(to, Write, false)
	}
	switch {
	case err != nil:
	case a.root != b.root:
		err = f.across(a, b, op)
	default:
		err = do(a.root, a.rel, b.rel)
	}
	if err == nil {
		return nil
	}
	if link, ok := err.(*os.LinkError); ok {
		err = link.Err
	}
	return &os.LinkError{Op: op, Old: from, New: to, Err: underlying(err)}
}

// across does it between two areas, without os.Root.
func (f *Fence) across(a, b spot, op string) error {
	if op == "rename" {
		return os.Rename(a.real, b.real)
	}
	return os.Link(a.real, b.real)
}

func (f *Fence) rename(from, to string) error {
	return f.pair("rename", from, to, (*os.Root).Rename)
}

func (f *Fence) link(from, to string) error { return f.pair("link", from, to, (*os.Root).Link) }

// symlink makes no link that leads out.
func (f *Fence) symlink(target, name string) error {
	s, err := f.find(name, Write, false)
	if err == nil {
		led := target
		if !filepath.IsAbs(led) {
			led = filepath.Dir(s.real) + string(filepath.Separator) + led
		}
		if _, err = f.find(led, Write, true); err == nil {
			err = s.root.Symlink(target, s.rel)
		}
	}
	if err == nil {
		return nil
	}
	if link, ok := err.(*os.LinkError); ok {
		err = link.Err
	}
	return &os.LinkError{Op: "symlink", Old: target, New: name, Err: underlying(err)}
}
