package matrix

import (
	"fmt"

	"ketloom/basis"
	"ketloom/operator"
)

// Plan says what a matrix will take before it is made.
type Plan struct {
	Rows, Columns int
	// Elements is the number of elements off the diagonal; exact where Exact is
	// set, else estimated from a sample of the rows.
	Elements int64
	Exact    bool
	// Values is the number of distinct values off the diagonal that the sample
	// (or all rows) showed, at most 65,537.
	Values int
	Real   bool
	// Bytes is what the chosen form takes; StoredBytes what the stored one does.
	Bytes, StoredBytes int64
	Form               Form
	Reason             string // why this form
}

// String is one line for a person.
func (p Plan) String() string {
	kind, about := "complex", "about "
	if p.Real {
		kind = "real"
	}
	if p.Exact {
		about = ""
	}
	return fmt.Sprintf("%d × %d, %s, %s%d elements off the diagonal, %s (%s): %.1f MiB",
		p.Rows, p.Columns, kind, about, p.Elements, p.Form, p.Reason, float64(p.Bytes)/(1<<20))
}

// sampleRows is the number of rows that a plan computes.
const sampleRows = 1024

// Estimate plans the matrix of op on the basis without making it: it proves that
// op keeps the sector and computes a sample of the rows, all of them where the
// basis is small.
func Estimate(op operator.Operator, b *basis.Basis, opts *Options) (Plan, error) {
	if err := prove(op, b); err != nil {
		return Plan{}, err
	}
	return newRows(op, b, b).plan(opts.withDefaults())
}

// newRows compiles op between two bases.
func newRows(op operator.Operator, from, to *basis.Basis) *rows {
	r := &rows{to: to, from: from, phases: from.Phases()}
	diagonal, moving := compile(op.Adjoint())
	r.diagonal, r.moving, r.kernels = diagonal, bundled(moving), len(diagonal)+len(moving)
	r.unfold = to.GroupOrder() == 1 && from.GroupOrder() > 1
	return r
}

// isReal reports whether every element is real.
func (r *rows) isReal() bool {
	for _, b := range append([]bundle{{kernels: r.diagonal}}, r.moving...) {
		for _, k := range b.kernels {
			if imag(k.coefficient) != 0 {
				return false
			}
		}
	}
	return r.from.Real() && r.to.Real()
}

// plan samples rows, evenly spread, and chooses the form.
func (r *rows) plan(o Options) (Plan, error) {
	n := r.to.Len()
	p := Plan{Rows: n, Columns: r.from.Len(), Real: r.isReal(), Exact: n <= sampleRows}
	count := min(n, sampleRows)
	distinct := map[complex128]bool{}
	var s scratch
	var found int64
	for k := range count {
		elements, _ := r.row(int(int64(k)*int64(n)/int64(count)), &s)
		found += int64(len(elements))
		for _, e := range elements {
			if len(distinct) <= mostCodes {
				distinct[e.value] = true
			}
		}
	}
	p.Elements = found
	if !p.Exact {
		p.Elements = int64(float64(found) / float64(count) * float64(n))
	}
	p.Values = len(distinct)
	p.StoredBytes = p.Elements*elementBytes(p) + int64(n)*(8+numberBytes(p.Real)) + int64(p.Values)*numberBytes(p.Real)
	p.choose(o, int64(r.kernels)*48)
	if o.Form == Stored && p.StoredBytes > o.Memory {
		return p, fmt.Errorf("matrix: the stored form needs %d MiB, more than the limit of %d MiB; raise Options.Memory or leave the form to Auto", p.StoredBytes>>20, o.Memory>>20)
	}
	return p, nil
}

func (p *Plan) choose(o Options, terms int64) {
	p.Form, p.Bytes = Stored, p.StoredBytes
	switch {
	case o.Form == Stored:
		p.Reason = "asked for"
	case o.Form == OnTheFly:
		p.Form, p.Bytes, p.Reason = OnTheFly, terms, "asked for"
	case p.StoredBytes <= o.Memory:
		p.Reason = fmt.Sprintf("fits the limit of %d MiB", o.Memory>>20)
	default:
		p.Form, p.Bytes = OnTheFly, terms
		p.Reason = fmt.Sprintf("stored it would need %d MiB, the limit is %d MiB", p.StoredBytes>>20, o.Memory>>20)
	}
}

// elementBytes is the size of a stored element: column and code.
func elementBytes(p Plan) int64 {
	column := int64(4)
	if int64(p.Columns) > 1<<32 {
		column = 8
	}
	switch {
	case p.Values <= 1<<8:
		return column + 1
	case p.Values <= mostCodes:
		return column + 2
	}
	return column + numberBytes(p.Real)
}

func numberBytes(real bool) int64 {
	if real {
		return 8
	}
	return 16
}
