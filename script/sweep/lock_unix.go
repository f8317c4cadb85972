//go:build unix

package sweep

import (
	"os"
	"syscall"
)

// lock takes the file for this program, or fails at once if another one has it.
func lock(f *os.File) error {
	return syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB)
}
