package pages

import "unsafe"

// smallest is the size in bytes from which on a slice is worth the question.
const smallest = 4 << 20

// Floats returns n zeros.
func Floats(n int) []float64 {
	x := make([]float64, n)
	Advise(x)
	return x
}

// Complexes returns n complex zeros.
func Complexes(n int) []complex128 {
	x := make([]complex128, n)
	Advise(x)
	return x
}

// Advise asks for large pages for the memory of a slice, up to its capacity. Call
// it before the memory is first written. The contents do not change.
func Advise[T any](x []T) {
	var entry T
	size := uintptr(cap(x)) * unsafe.Sizeof(entry)
	if size < smallest {
		return
	}
	advise(unsafe.Slice((*byte)(unsafe.Pointer(unsafe.SliceData(x))), size))
}
