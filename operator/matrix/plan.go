package matrix

import (
	"fmt"

	"ketloom/basis"
	"ketloom/operator"
)

// Plan says what a matrix will take before it is made.
type Plan struct {
	Rows, Columns int
	// Elements is the number of stored elements off the diagonal; exact where
	// Exact is set, else estimated from a sample of the rows.
	Elements int64
	Exact    bool
	// Values is the number of distinct values off the diagonal, without the
	// norms of the states, that the sample (or all rows) showed, at most 65,537.
	Values int
	Real   bool
	// Bytes is what the chosen form takes; StoredBytes what the stored one does.
	Bytes, StoredBytes int64
	Form               Form
	Reason             string // why this form

	uniform bool // all elements off the diagonal have the same value
	value   complex128
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
	swaps, bundles, flips := paired(moving)
	r.diagonal, r.swaps, r.moving, r.kernels = diagonal, swaps, bundles, len(diagonal)+len(moving)
	r.still, r.hops = len(flips), from.Hops(append(flips, 0))
	r.weights = newWeights(to, from)
	return r
}

// isReal reports whether every element is real.
func (r *rows) isReal() bool {
	bundles := append([]bundle{{kernels: r.diagonal}}, r.moving...)
	for _, x := range r.swaps {
		bundles = append(bundles, bundle{kernels: []kernel{x.kernel}})
	}
	for _, b := range bundles {
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
	p.sample(r, min(n, sampleRows))
	p.StoredBytes = p.Elements*elementBytes(p) + int64(n)*(8+numberBytes(p.Real)) + int64(p.Values)*numberBytes(p.Real)
	flying := int64(r.kernels) * 48
	if r.weights.from != nil { // the weighted source
		p.StoredBytes += int64(p.Columns) * numberBytes(p.Real)
		flying += int64(p.Columns) * numberBytes(p.Real)
	}
	p.choose(o, flying)
	if o.Form == Stored && p.StoredBytes > o.Memory {
		return p, fmt.Errorf("matrix: the stored form needs %d MiB, more than the limit of %d MiB; raise Options.Memory or leave the form to Auto", p.StoredBytes>>20, o.Memory>>20)
	}
	return p, nil
}

// mergeBelow is the part of the elements that must remain after merging for
// it to be worth its sorting.
const mergeBelow = 0.9

// sample computes some rows, unmerged and merged, and chooses between the two.
func (p *Plan) sample(r *rows, count int) {
	raw, merged := newTally(), newTally()
	var s scratch
	for k := range count {
		i := int(int64(k) * int64(p.Rows) / int64(count))
		r.merge = false
		r.row(i, &s)
		raw.add(s.values)
		r.merge = true
		r.row(i, &s)
		merged.add(s.values)
	}
	best := raw
	if r.merge = float64(merged.elements) < mergeBelow*float64(raw.elements); r.merge {
		best = merged
	}
	p.Values, p.Elements = len(best.distinct), best.elements
	if p.uniform = p.Values == 1; p.uniform {
		for v := range best.distinct {
			p.value = v
		}
	}
	if !p.Exact {
		p.Elements = int64(float64(best.elements) / float64(count) * float64(p.Rows))
	}
}

// tally counts elements and their distinct values.
type tally struct {
	elements int64
	distinct map[complex128]bool
}

func newTally() *tally { return &tally{distinct: map[complex128]bool{}} }

func (t *tally) add(values []complex128) {
	t.elements += int64(len(values))
	for _, v := range values {
		if len(t.distinct) <= mostCodes {
			t.distinct[v] = true
		}
	}
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
	case p.uniform:
		return column
	case p.Values <= mostNarrow:
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
