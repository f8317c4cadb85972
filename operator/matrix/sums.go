package matrix

// The sums of rows over their elements off the diagonal. Neighbouring elements
// of real rows go to two sums, which are added at the end, so that one addition
// need not wait for the other. The order is the same in every form and for any
// number of goroutines, so that all give the same bits; a matrix whose elements
// all have one value multiplies by it at the end.

// sumReal computes dst[i] = Σ_j A_ij src[j] for rows first … last-1.
func (s *store) sumReal(dst, src []float64, first, last int) {
	switch {
	case s.wide != nil:
		s.sumWide(dst, src, first, last)
	case s.uniform:
		s.sumUniform(dst, src, first, last)
	case s.narrow != nil:
		sumCoded(s, s.narrow, dst, src, first, last)
	case s.codes != nil:
		sumCoded(s, s.codes, dst, src, first, last)
	default:
		s.sumPlain(dst, src, first, last)
	}
}

func (s *store) sumWide(dst, src []float64, first, last int) {
	for i := first; i < last; i++ {
		a, b := 0.0, 0.0
		for n := s.start[i]; n < s.start[i+1]; n++ {
			x := real(s.at(n)) * src[s.wide[n]]
			if (n-s.start[i])%2 == 0 {
				a += x
			} else {
				b += x
			}
		}
		dst[i] = a + b
	}
}

func (s *store) sumUniform(dst, src []float64, first, last int) {
	value := real(s.value)
	for i := first; i < last; i++ {
		columns := s.columns[s.start[i]:s.start[i+1]]
		a, b := 0.0, 0.0
		n := 0
		for ; n+1 < len(columns); n += 2 {
			a += src[columns[n]]
			b += src[columns[n+1]]
		}
		if n < len(columns) {
			a += src[columns[n]]
		}
		dst[i] = value * (a + b)
	}
}

// sumCoded looks the values up in a table.
func sumCoded[C uint8 | uint16](s *store, codes []C, dst, src []float64, first, last int) {
	table := s.realTable
	for i := first; i < last; i++ {
		from, to := s.start[i], s.start[i+1]
		columns, codes := s.columns[from:to], codes[from:to]
		codes = codes[:len(columns)]
		a, b := 0.0, 0.0
		n := 0
		for ; n+1 < len(columns); n += 2 {
			a += table[codes[n]] * src[columns[n]]
			b += table[codes[n+1]] * src[columns[n+1]]
		}
		if n < len(columns) {
			a += table[codes[n]] * src[columns[n]]
		}
		dst[i] = a + b
	}
}

func (s *store) sumPlain(dst, src []float64, first, last int) {
	for i := first; i < last; i++ {
		from, to := s.start[i], s.start[i+1]
		columns, values := s.columns[from:to], s.realValues[from:to]
		values = values[:len(columns)]
		a, b := 0.0, 0.0
		n := 0
		for ; n+1 < len(columns); n += 2 {
			a += values[n] * src[columns[n]]
			b += values[n+1] * src[columns[n+1]]
		}
		if n < len(columns) {
			a += values[n] * src[columns[n]]
		}
		dst[i] = a + b
	}
}

// sumRealOfComplex is sumReal for a complex source.
func (s *store) sumRealOfComplex(dst, src []complex128, first, last int) {
	for i := first; i < last; i++ {
		var re, im float64
		for n := s.start[i]; n < s.start[i+1]; n++ {
			v, x := real(s.at(n)), src[s.column(n)]
			re += v * real(x)
			im += v * imag(x)
		}
		dst[i] = complex(re, im)
	}
}

// sumComplex is sumReal for complex elements.
func (s *store) sumComplex(dst, src []complex128, first, last int) {
	switch {
	case s.wide != nil || s.uniform:
		s.sumWideComplex(dst, src, first, last)
	case s.narrow != nil:
		sumCodedComplex(s, s.narrow, dst, src, first, last)
	case s.codes != nil:
		sumCodedComplex(s, s.codes, dst, src, first, last)
	default:
		s.sumPlainComplex(dst, src, first, last)
	}
}

func (s *store) sumWideComplex(dst, src []complex128, first, last int) {
	for i := first; i < last; i++ {
		var re, im, re2, im2 float64
		for n := s.start[i]; n < s.start[i+1]; n++ {
			v, x := s.at(n), src[s.column(n)]
			re += real(v) * real(x)
			re2 += imag(v) * imag(x)
			im += real(v) * imag(x)
			im2 += imag(v) * real(x)
		}
		dst[i] = complex(re-re2, im+im2)
	}
}

// sumCodedComplex looks the values up in a table.
func sumCodedComplex[C uint8 | uint16](s *store, codes []C, dst, src []complex128, first, last int) {
	table := s.table
	for i := first; i < last; i++ {
		from, to := s.start[i], s.start[i+1]
		columns, codes := s.columns[from:to], codes[from:to]
		codes = codes[:len(columns)]
		var re, im, re2, im2 float64
		for n, column := range columns {
			v, x := table[codes[n]], src[column]
			re += real(v) * real(x)
			re2 += imag(v) * imag(x)
			im += real(v) * imag(x)
			im2 += imag(v) * real(x)
		}
		dst[i] = complex(re-re2, im+im2)
	}
}

func (s *store) sumPlainComplex(dst, src []complex128, first, last int) {
	for i := first; i < last; i++ {
		from, to := s.start[i], s.start[i+1]
		values := s.values[from:to]
		var re, im, re2, im2 float64
		for n, column := range s.columns[from:to] {
			v, x := values[n], src[column]
			re += real(v) * real(x)
			re2 += imag(v) * imag(x)
			im += real(v) * imag(x)
			im2 += imag(v) * real(x)
		}
		dst[i] = complex(re-re2, im+im2)
	}
}
