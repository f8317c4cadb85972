package model

import (
	"context"
	"encoding/json"
	"flag"
	"fmt"
	"math"
	"os"
	"sort"
	"testing"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

// record is one check value; its source stands in the file and in How.
type record struct {
	ID, How   string
	Value     json.RawMessage
	Tolerance float64
	Data      struct {
		LowestByMomentum map[string][]float64 `json:"lowest_by_momentum"`
		Lowest           map[string]float64   // by total momentum
		Momentum         int                  `json:"k_index"`
		Momenta          []int                `json:"k_indices"`
		Counts           []int
		Fields           []float64
		Triangles        [][3]int
		Triplet          float64 `json:"E_triplet"`
		Next             []float64
		SectorDims       []int `json:"sector_dims"`
	}
}

var (
	records = map[string]record{}
	read    = map[string]bool{} // which of them a test has asked for
)

// TestMain reads the check values, and fails a complete run in which no test asks for
// one of them.
func TestMain(m *testing.M) {
	data, err := os.ReadFile("testdata/values.json")
	if err != nil {
		panic(err)
	}
	var file struct {
		Source  string
		Records []record
	}
	if err := json.Unmarshal(data, &file); err != nil {
		panic(err)
	}
	for _, r := range file.Records {
		records[r.ID] = r
	}
	code := m.Run()
	if code == 0 && complete() {
		for id := range records {
			if !read[id] {
				fmt.Fprintf(os.Stderr, "no test reads the check value %s\n", id)
				code = 1
			}
		}
	}
	os.Exit(code)
}

// complete reports whether nothing was left out of this run.
func complete() bool {
	for _, name := range []string{"test.run", "test.skip", "test.list", "test.fuzz"} {
		if flag.Lookup(name).Value.String() != "" {
			return false
		}
	}
	return !testing.Short()
}

// value reads the value of a record into a new T.
func value[T any](t *testing.T, id string) (v T, r record) {
	t.Helper()
	r, ok := records[id]
	if !ok {
		t.Fatalf("no check value %q", id)
	}
	read[id] = true
	if err := json.Unmarshal(r.Value, &v); err != nil {
		t.Fatalf("%s: %v", id, err)
	}
	return v, r
}

// expect compares numbers with those of a record.
func expect(t *testing.T, r record, what string, got, want []float64) {
	t.Helper()
	if len(got) < len(want) {
		t.Errorf("%s, %s: only %d numbers, want %v", r.ID, what, len(got), want)
		return
	}
	for i, w := range want {
		if !(math.Abs(got[i]-w) <= max(r.Tolerance, 1e-10)) {
			t.Errorf("%s, %s: got %.12g, want %.12g (%s)", r.ID, what, got[:len(want)], want, r.How)
			return
		}
	}
}

// built returns a function that refuses an operator or cluster with an error.
func built[T any](t *testing.T) func(T, error) T {
	t.Helper()
	return func(v T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}

// onSites returns the space of one site for each of the cluster.
func onSites(t *testing.T, c *lattice.Cluster, site basis.Site) *basis.Space {
	t.Helper()
	return built[*basis.Space](t)(basis.Uniform(c.Sites(), site))
}

// spectrum returns all energies of a sector, ascending; none where it holds no
// state.
func spectrum(t *testing.T, h operator.Operator, sector basis.Sector) []float64 {
	t.Helper()
	ctx := context.Background()
	b, err := basis.New(ctx, h.Space(), sector, nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := matrix.New(ctx, h, b, nil)
	if err != nil {
		t.Fatal(err)
	}
	n := m.Dim()
	elements := m.Dense()
	if !m.Real() {
		return eigenvalues(t, elements, n)
	}
	a := make([]float64, n*n)
	for i, z := range elements {
		a[i] = real(z)
	}
	values, _, err := dense.EigenReal(a, n, false)
	if err != nil {
		t.Fatal(err)
	}
	return values
}

// eigenvalues returns those of a Hermitian matrix, ascending.
func eigenvalues(t *testing.T, a []complex128, n int) []float64 {
	t.Helper()
	values, _, err := dense.EigenComplex(a, n, false)
	if err != nil {
		t.Fatal(err)
	}
	return values
}

// byMomentum returns the energies of every momentum sector of a cluster, by
// the index of the momentum.
func byMomentum(t *testing.T, h operator.Operator, c *lattice.Cluster, sector basis.Sector) [][]float64 {
	t.Helper()
	var list [][]float64
	for _, k := range c.Momenta() {
		sector.Symmetries = c.Sector(k)
		list = append(list, spectrum(t, h, sector))
	}
	return list
}

// lowestByMomentum returns the k lowest energies of every momentum sector of a
// cluster, by the index of the momentum, found by Lanczos.
func lowestByMomentum(t *testing.T, h operator.Operator, c *lattice.Cluster, sector basis.Sector, k int) [][]float64 {
	t.Helper()
	var list [][]float64
	for _, momentum := range c.Momenta() {
		sector.Symmetries = c.Sector(momentum)
		list = append(list, lowest(t, h, sector, k))
	}
	return list
}

// without returns the levels of a that are not in b, both ascending, one for one: with
// the levels at S_z = 0 and 1, those of total spin 0.
func without(t *testing.T, a, b []float64) []float64 {
	t.Helper()
	var rest []float64
	for _, e := range a {
		if len(b) > 0 && math.Abs(e-b[0]) < 1e-8 {
			b = b[1:]
		} else {
			rest = append(rest, e)
		}
	}
	if len(b) > 0 {
		t.Errorf("the level %v has no partner", b[0])
	}
	return rest
}

// merged returns all numbers in ascending order.
func merged(lists [][]float64) []float64 {
	var all []float64
	for _, l := range lists {
		all = append(all, l...)
	}
	sort.Float64s(all)
	return all
}

// charges is a sector of fixed charges.
func charges(list ...basis.ChargeValue) basis.Sector { return basis.Sector{Charges: list} }
