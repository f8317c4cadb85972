package pages

import (
	"os"
	"unsafe"

	"golang.org/x/sys/unix"
)

// advise covers the whole pages within the memory.
func advise(memory []byte) {
	page := uintptr(os.Getpagesize())
	first := uintptr(unsafe.Pointer(unsafe.SliceData(memory)))
	skip := (page - first%page) % page
	length := (uintptr(len(memory)) - skip) / page * page
	_ = unix.Madvise(memory[skip:skip+length], unix.MADV_HUGEPAGE) // a hint; without it all is as before
}
