package matrix

import (
	"context"
	"fmt"

	"ketloom/basis"
	"ketloom/operator"
)

// Matrix is the matrix of an operator from the states of one basis to those of
// another. Products may be made by one goroutine at a time; each uses
// Options.Workers goroutines itself.
type Matrix struct {
	rows    *rows
	plan    Plan
	workers int
	store   *store // nil on the fly
	scratch []scratch
	product product
}

// New makes the matrix of op on a basis, ⟨i~|op|j~⟩. op need not be Hermitian.
//
// Errors: op carries an error or belongs to another space; op does not conserve
// a charge or commute with a symmetry of the sector (the message names a term);
// the stored form was asked for and does not fit; the context ended.
func New(ctx context.Context, op operator.Operator, b *basis.Basis, opts *Options) (*Matrix, error) {
	if err := prove(op, b); err != nil {
		return nil, err
	}
	return build(ctx, newRows(op, b, b), opts.withDefaults())
}

// Between makes the rectangular matrix of op from one sector into another,
//
//	M_ij = ⟨i~|op|j~⟩,  i in `to` (rows), j in `from` (columns).
//
// What op leads elsewhere is projected away: of op only the part counts that
// changes each charge by the difference of its values and that transforms under
// the symmetries as χ_to χ_from*. Both bases must have the same generators, or
// one of them none.
func Between(ctx context.Context, op operator.Operator, from, to *basis.Basis, opts *Options) (*Matrix, error) {
	part, err := between(op, from, to)
	if err != nil {
		return nil, err
	}
	if from.GroupOrder() == 1 && to.GroupOrder() > 1 {
		return nil, fmt.Errorf("matrix: from a basis without symmetries into one with; make the matrix of the adjoint the other way round")
	}
	return build(ctx, newRows(part, from, to), opts.withDefaults())
}

func build(ctx context.Context, r *rows, o Options) (*Matrix, error) {
	plan, err := r.plan(o)
	if err != nil {
		return nil, err
	}
	m := &Matrix{rows: r, plan: plan, workers: o.Workers, scratch: make([]scratch, o.Workers)}
	if plan.Form == OnTheFly {
		return m, ctx.Err()
	}
	if m.store, err = fill(ctx, r, &m.plan, o); err != nil {
		return nil, err
	}
	m.plan.Elements, m.plan.Exact = m.store.elements(), true
	m.plan.Values = m.store.distinct()
	m.plan.StoredBytes = m.store.bytes()
	if r.weights.from != nil {
		m.plan.StoredBytes += int64(m.plan.Columns) * numberBytes(m.plan.Real)
	}
	m.plan.Bytes = m.plan.StoredBytes
	return m, nil
}

// Rows returns the number of states of the target basis.
func (m *Matrix) Rows() int { return m.plan.Rows }

// Columns returns the number of states of the source basis.
func (m *Matrix) Columns() int { return m.plan.Columns }

// Dim returns the number of rows, the dimension of a square matrix.
func (m *Matrix) Dim() int { return m.plan.Rows }

// Real reports whether all elements are real, so that Apply may be used.
func (m *Matrix) Real() bool { return m.plan.Real }

// Plan returns what the matrix takes; exact once it is stored.
func (m *Matrix) Plan() Plan { return m.plan }

// Dense returns the elements, row after row: element (i, j) at i·Columns()+j.
// Cost: 16 bytes an element; meant for small sectors.
func (m *Matrix) Dense() []complex128 {
	out := make([]complex128, m.plan.Rows*m.plan.Columns)
	var s scratch
	w := &m.rows.weights
	for i := range m.plan.Rows {
		diagonal := m.rows.row(i, &s)
		for n, column := range s.columns {
			norms := w.column(column) * w.row(i)
			out[i*m.plan.Columns+column] += complex(norms*real(s.values[n]), norms*imag(s.values[n]))
		}
		if m.rows.to == m.rows.from {
			out[i*m.plan.Columns+i] += diagonal
		}
	}
	return out
}
