package archive

import (
	"errors"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
	"sync"
)

// unfinished holds the names of the temporary files of all open writers.
var unfinished struct {
	sync.Mutex
	names map[string]bool
}

// createTemporary creates and remembers a file beside path, with the permissions
// that the system gives to new files. The lock spans both, so that DiscardOpen
// never misses one.
func createTemporary(path string) (*os.File, error) {
	unfinished.Lock()
	defer unfinished.Unlock()
	const attempts = 100
	for range attempts {
		name := filepath.Join(filepath.Dir(path), fmt.Sprintf(".%s.%016x.partial", filepath.Base(path), rand.Uint64()))
		file, err := os.OpenFile(name, os.O_RDWR|os.O_CREATE|os.O_EXCL, 0o666)
		if errors.Is(err, fs.ErrExist) {
			continue
		}
		if err != nil {
			return nil, err
		}
		if unfinished.names == nil {
			unfinished.names = map[string]bool{}
		}
		unfinished.names[name] = true
		return file, nil
	}
	return nil, errors.New("no free name for a temporary file in the folder")
}

func forget(name string) {
	unfinished.Lock()
	defer unfinished.Unlock()
	delete(unfinished.names, name)
}

// DiscardOpen removes the temporary files of all archives that are being
// written, for a program that must leave at once. Their writers fail at Close;
// files that an earlier Close has put at their place stay. It may be called from
// any goroutine at any time.
func DiscardOpen() {
	unfinished.Lock()
	defer unfinished.Unlock()
	for name := range unfinished.names {
		os.Remove(name)
	}
	clear(unfinished.names)
}

// commit puts the temporary file at its place. The lock keeps DiscardOpen out
// between the rename and the forgetting.
func commit(name, path string) error {
	unfinished.Lock()
	defer unfinished.Unlock()
	if !unfinished.names[name] {
		return errors.New("the temporary file was removed by DiscardOpen")
	}
	if err := os.Rename(name, path); err != nil {
		return err
	}
	delete(unfinished.names, name)
	return nil
}

// syncFolder makes the rename last. A system that cannot is left alone: the file
// itself is on the disk and stands at its place.
func syncFolder(folder string) {
	if f, err := os.Open(folder); err == nil {
		_ = f.Sync()
		f.Close()
	}
}
