package matrix

import (
	"context"
	"testing"

	"ketloom/basis"
	"ketloom/operator/model"
)

// BenchmarkStoredBand: eight fermions in a Chern band on 6×4 cells at one momentum,
// with thousands of distinct complex values; limit: the bare gather.
func BenchmarkStoredBand(b *testing.B) {
	p, err := model.Checkerboard(1, model.SunSecond, 0, 1).Projected(6, 4, nil)
	if err != nil {
		b.Fatal(err)
	}
	states, err := basis.New(context.Background(), p.Space, p.Sector(8, 0, 0), nil)
	if err != nil {
		b.Fatal(err)
	}
	m, err := New(context.Background(), p.Operator, states, nil)
	if err != nil {
		b.Fatal(err)
	}
	src, dst := make([]complex128, m.Columns()), make([]complex128, m.Rows())
	report(b, m.plan.Elements, func() { m.ApplyComplex(dst, src) }, func() { m.gatherComplex(dst, src) })
	b.ReportMetric(float64(m.plan.Bytes)/float64(m.plan.Elements), "bytes/element")
	b.ReportMetric(float64(m.plan.Values), "values")
}
