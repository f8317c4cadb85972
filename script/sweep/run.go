package sweep

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"math"
	"time"

	"ketloom/lanczos"
)

// Point is one place of a sweep. Its name tells it from the others; its values are
// what the function needs to know.
type Point struct {
	Name   string             `json:"name"`
	Values map[string]float64 `json:"values,omitempty"`
}

// Outcome is what was found at a point: lists of numbers and texts by name, which
// the journal keeps, and vectors, which only the next point gets to see.
type Outcome struct {
	Numbers map[string][]float64 `json:"numbers,omitempty"`
	Notes   map[string]string    `json:"notes,omitempty"`
	Vectors []lanczos.Vector     `json:"-"`
}

// Row is a finished point.
type Row struct {
	Point
	Outcome
}

// Number returns the first number of a name in the row; ok is false if there is
// none.
func (r Row) Number(name string) (x float64, ok bool) {
	if list := r.Numbers[name]; len(list) > 0 {
		return list[0], true
	}
	return 0, false
}

// Run computes what the journal does not hold yet, point by point in order, and
// returns a row for each point, in order. start holds the vectors of the point
// before, nil for the first one computed.
//
// Errors: two points of one name, a point of the journal with other values, numbers
// that are not finite, an error of the function (wrapped, with the point's name) or
// of the context. What was finished before is in the journal, and the rows come
// with the error.
func (j *Journal) Run(ctx context.Context, points []Point, solve func(ctx context.Context, p Point, start []lanczos.Vector) (Outcome, error)) ([]Row, error) {
	if err := j.check(points); err != nil {
		return nil, err
	}
	var rows []Row
	var start []lanczos.Vector
	begun, computed := time.Now(), 0
	for i, p := range points {
		row, known := j.rows[p.Name]
		if !known {
			if err := ctx.Err(); err != nil {
				return rows, err
			}
			outcome, err := solve(ctx, p, start)
			if err == nil {
				err = outcome.finite()
			}
			if err != nil {
				return rows, fmt.Errorf("sweep: point %q: %w", p.Name, err)
			}
			row = Row{p, outcome}
			if err := j.append(row); err != nil {
				return rows, err
			}
			j.rows[p.Name] = row
			start = outcome.Vectors
			computed++
		}
		rows = append(rows, row)
		if j.progress != nil {
			j.progress("sweep", int64(i+1), int64(len(points)), float64(computed)/max(time.Since(begun).Seconds(), 1e-9))
		}
	}
	return rows, nil
}

// check compares the points with each other and with the journal.
func (j *Journal) check(points []Point) error {
	seen := map[string]bool{}
	for _, p := range points {
		if p.Name == "" {
			return errors.New("sweep: a point without a name; names tell finished points from others")
		}
		if seen[p.Name] {
			return fmt.Errorf("sweep: two points are called %q; give each a name of its own", p.Name)
		}
		seen[p.Name] = true
		for name, v := range p.Values {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return fmt.Errorf("sweep: %s = %v at point %q; values must be finite", name, v, p.Name)
			}
		}
		if row, known := j.rows[p.Name]; known && !maps.Equal(row.Values, p.Values) {
			return fmt.Errorf("sweep: %w: the journal has point %q with the values %v, now they are %v; name the point or the study anew", ErrJournal, p.Name, row.Values, p.Values)
		}
	}
	return nil
}

// finite reports which number cannot be kept.
func (o Outcome) finite() error {
	for name, list := range o.Numbers {
		for i, x := range list {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				return fmt.Errorf("number %d of %q is %v; only finite numbers are kept", i, name, x)
			}
		}
	}
	return nil
}
