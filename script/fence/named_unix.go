//go:build unix

package fence

import (
	"errors"
	"os"
	"syscall"
)

// named returns the file under the name that the script gave it, and closes f.
func named(f *os.File, name string) (*os.File, error) {
	raw, err := f.SyscallConn()
	if err != nil {
		return nil, errors.Join(err, f.Close())
	}
	copied := -1
	var fault error
	err = raw.Control(func(fd uintptr) {
		syscall.ForkLock.RLock()
		defer syscall.ForkLock.RUnlock()
		if copied, fault = syscall.Dup(int(fd)); fault == nil {
			syscall.CloseOnExec(copied)
		}
	})
	if err := errors.Join(err, fault, f.Close()); err != nil {
		return nil, err
	}
	return os.NewFile(uintptr(copied), name), nil
}
