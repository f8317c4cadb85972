package lanczos

// Vector is a real or a complex vector: exactly one of its fields is set.
type Vector struct {
	Real    []float64
	Complex []complex128
}

// Len returns the number of components.
func (v Vector) Len() int {
	if v.Complex != nil {
		return len(v.Complex)
	}
	return len(v.Real)
}

// At returns component i.
func (v Vector) At(i int) complex128 {
	if v.Complex != nil {
		return v.Complex[i]
	}
	return complex(v.Real[i], 0)
}

// AsComplex returns the components as complex numbers: the slice Complex itself
// where it is set (shared, not a copy), else a new one.
func (v Vector) AsComplex() []complex128 {
	if v.Complex != nil || v.Real == nil {
		return v.Complex
	}
	z := make([]complex128, len(v.Real))
	for i, x := range v.Real {
		z[i] = complex(x, 0)
	}
	return z
}
