package page

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

// Save writes the page to a file whose name ends with html or htm. The file is
// complete or absent: it is written beside its place and renamed. Saving again
// replaces it; more may be appended in between.
//
// Errors: those of Write, another ending, a folder that is not there, or what the
// file system says.
func (p *Page) Save(path string) error {
	if ending := strings.ToLower(filepath.Ext(path)); ending != ".html" && ending != ".htm" {
		return fmt.Errorf("page: %w: the file name %q; give one that ends with .html", ErrContent, path)
	}
	data, err := p.render(filepath.Dir(path))
	if err != nil {
		return err
	}
	if err := replace(path, data); err != nil {
		return fmt.Errorf("page: %s cannot be saved: %w", path, err)
	}
	return nil
}

// replace puts data at path, whole or not at all: a new file in the same folder
// is written, synced and renamed.
func replace(path string, data []byte) error {
	folder := filepath.Dir(path)
	if info, err := os.Stat(folder); errors.Is(err, fs.ErrNotExist) || err == nil && !info.IsDir() {
		return fmt.Errorf("there is no folder %s; make it first: %w", folder, fs.ErrNotExist)
	}
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		return fmt.Errorf("a folder has this name; give another: %w", fs.ErrExist)
	}
	f, err := create(path)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	err = errors.Join(err, f.Sync(), f.Close())
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		return errors.Join(err, os.Remove(f.Name()))
	}
	return nil
}

// create opens a file beside path whose name nothing else has, with the
// permissions that any new file gets.
func create(path string) (*os.File, error) {
	for n := 0; ; n++ {
		name := filepath.Join(filepath.Dir(path), fmt.Sprintf(".%s.%d-%d", filepath.Base(path), os.Getpid(), n))
		f, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
		if !errors.Is(err, fs.ErrExist) {
			return f, err
		}
	}
}
