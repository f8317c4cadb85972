package basis_test

import (
	"context"
	"fmt"
	"math/rand/v2"
	"testing"
	"time"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/basis/pages"
)

// symmetric36 is the sector of all symmetries of the 6×6 square lattice at S_z = 0,
// even under spin inversion: 576 elements.
func symmetric36(b testing.TB) (*basis.Space, basis.Sector) {
	b.Helper()
	c, err := lattice.Torus(lattice.Square(), 6, 6)
	if err != nil {
		b.Fatal(err)
	}
	space, err := basis.Uniform(36, basis.SpinHalf())
	if err != nil {
		b.Fatal(err)
	}
	rotation, err := c.Rotation([2]float64{0, 0}, 4)
	if err != nil {
		b.Fatal(err)
	}
	reflection, err := c.Reflection([2]float64{0, 0}, [2]float64{1, 0})
	if err != nil {
		b.Fatal(err)
	}
	symmetries := append(c.Sector(c.Momentum(0, 0)), group.Eigenvalue{Generator: rotation}, group.Eigenvalue{Generator: reflection},
		group.Eigenvalue{Generator: group.Relabel(36, []int{1, 0})})
	return space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}, Symmetries: symmetries}
}

// BenchmarkSquare36 reports the enumeration in seconds, in nanoseconds a
// representative and in bytes beyond the list; its limit is to write the list and the
// stabilisers once more. The search of representative and index is reported in
// nanoseconds a configuration, for so many different ones that their tables stay in the
// processor, and for more; its limit are eight reads from a table of 8 MiB, which is what
// it needs, one after the other independent of each other.
func BenchmarkSquare36(b *testing.B) {
	if testing.Short() {
		b.Skip("15.8 million states")
	}
	space, sector := symmetric36(b)
	var made *basis.Basis
	for b.Loop() {
		begun := time.Now()
		var err error
		if made, err = basis.New(context.Background(), space, sector, nil); err != nil {
			b.Fatal(err)
		}
		spent := time.Since(begun)
		b.ReportMetric(spent.Seconds(), "s/enumeration")
		b.ReportMetric(float64(spent.Nanoseconds())/float64(made.Len()), "ns/representative")
		b.ReportMetric(spent.Seconds()/writing(made.Len()).Seconds(), "times-limit/enumeration")
	}
	if made.Len() != 15804956 {
		b.Fatalf("%d states", made.Len())
	}
	b.ReportMetric(float64(made.Memory()-int64(made.Len())*8)/1e6, "MB/beyond-list")
	r := rand.New(rand.NewPCG(1, 1))
	list := make([]basis.Configuration, 1<<16)
	for i := range list {
		c := made.At(r.IntN(made.Len()))
		for { // exchange two neighbours
			k := r.IntN(35)
			if c>>k&1 != c>>(k+1)&1 {
				list[i] = c ^ 3<<k
				break
			}
		}
	}
	for _, distinct := range []int{1 << 10, 1 << 16} {
		spent := locating(made, list[:distinct])
		b.ReportMetric(spent, fmt.Sprintf("ns/locate-among-%d", distinct))
		b.ReportMetric(spent/reading(), fmt.Sprintf("times-limit/locate-among-%d", distinct))
		b.ReportMetric(hopping(made, list[:distinct]), fmt.Sprintf("ns/hop-among-%d", distinct))
	}
}

// writing returns the time to copy a list of n configurations and stabilisers.
func writing(n int) time.Duration {
	list, stab := make([]uint64, n), make([]uint16, n)
	begun := time.Now()
	copy(make([]uint64, n), list)
	copy(make([]uint16, n), stab)
	return time.Since(begun)
}

// sink keeps what reading reads.
var sink uint64

// reading returns the nanoseconds of eight independent reads from 8 MiB.
func reading() float64 {
	table := make([]uint64, 1<<20)
	pages.Advise(table)
	for i := range table {
		table[i] = uint64(i)
	}
	const rounds = 1 << 20
	begun := time.Now()
	at := uint64(1)
	for range rounds {
		var sum uint64
		for k := range uint64(8) {
			at = at*6364136223846793005 + k
			sum += table[at>>44]
		}
		sink += sum
	}
	return float64(time.Since(begun).Nanoseconds()) / rounds
}

// hopping returns the nanoseconds a configuration of locating all that exchanges of
// neighbours make of the given ones, as products do.
func hopping(made *basis.Basis, list []basis.Configuration) float64 {
	var flips []basis.Configuration
	for k := range 35 {
		flips = append(flips, 3<<k)
	}
	hops := made.Hops(flips)
	batch := &basis.Batch{}
	var which []int
	located := 0
	begun := time.Now()
	for range 1 << 20 / len(list) {
		for _, c := range list {
			which = which[:0]
			for k := range 35 {
				if c>>k&1 != c>>(k+1)&1 {
					which = append(which, k)
				}
			}
			hops.LocateAll(c, which, batch)
			located += len(which)
		}
	}
	return float64(time.Since(begun).Nanoseconds()) / float64(located)
}

// locating returns the nanoseconds a configuration that LocateAll takes.
func locating(made *basis.Basis, list []basis.Configuration) float64 {
	begun := time.Now()
	batch := &basis.Batch{}
	rounds := 1 << 24 / len(list)
	for range rounds {
		for at := 0; at < len(list); at += 64 {
			batch.Configurations = append(batch.Configurations[:0], list[at:at+64]...)
			made.LocateAll(batch)
		}
	}
	return float64(time.Since(begun).Nanoseconds()) / float64(rounds*len(list))
}

// The 6×6 square lattice at S_z = 0: dimensions by Burnside's formula over all 288
// elements of the space group and 576 with spin inversion. Values: an independent
// program that enumerates the orbits.
func TestDimensionsOf36Spins(t *testing.T) {
	space, sector := symmetric36(t)
	all := sector.Symmetries
	for _, c := range []struct {
		name       string
		symmetries []group.Eigenvalue
		want       int64
	}{
		{"translations", all[:2], 252091362},
		{"space group", all[:4], 31566122},
		{"even under spin inversion", all, 15804956},
		{"odd under spin inversion", append(all[:4:4], group.Eigenvalue{Generator: all[4].Generator, Turn: group.NewTurn(1, 2)}), 15761166},
	} {
		got, err := basis.Dimension(space, basis.Sector{Charges: sector.Charges, Symmetries: c.symmetries})
		if err != nil || got != c.want {
			t.Errorf("%s: %d states (%v), want %d", c.name, got, err, c.want)
		}
	}
}
