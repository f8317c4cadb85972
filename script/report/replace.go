package report

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

// replace puts data at path, whole or not at all: a new file in the same folder
// is written, synced and renamed. Other files are never touched.
func replace(path string, data []byte) (err error) {
	folder := filepath.Dir(path)
	if info, err := os.Stat(folder); err != nil || !info.IsDir() {
		return fmt.Errorf("%s cannot be saved: there is no folder %s; make it first: %w", path, folder, cause(err, fs.ErrNotExist))
	}
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		return fmt.Errorf("%s cannot be saved: a folder has this name; give another: %w", path, fs.ErrExist)
	}
	f, err := create(path)
	if err != nil {
		return fmt.Errorf("%s cannot be saved: %w", path, err)
	}
	_, err = f.Write(data)
	err = errors.Join(err, f.Sync(), f.Close())
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		return fmt.Errorf("%s cannot be saved: %w", path, errors.Join(err, os.Remove(f.Name())))
	}
	return nil
}

func cause(err, otherwise error) error {
	if err != nil {
		return err
	}
	return otherwise
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
