// Tower asks whether a frustrated magnet orders: it finds the lowest levels of every
// symmetry sector of a cluster, labels them with momentum, irreducible representation
// and total spin, and looks for the tower of states that an ordered magnet has on a
// finite cluster, levels with energies proportional to S(S+1) in the sectors of its
// order. The static structure factor of the ground state shows where in the Brillouin
// zone the order is.
//
// Clusters and couplings are chosen by the flags; the default is 18 spins 1/2 on the
// square lattice. The methods are published ones:
//
//   - tower of states: P. W. Anderson, Phys. Rev. 86, 694 (1952); B. Bernu,
//     C. Lhuillier, L. Pierre, Phys. Rev. Lett. 69, 2590 (1992)
//
// Run it with -h for the flags.
package main

import (
	"context"
	"flag"
	"fmt"
	"math"
	"os"
	"os/signal"
	"path/filepath"

	"ketloom/script/progress"
)

// settings are the flags.
type settings struct {
	lattice    string
	t1, t2     [2]int
	j1, j2     float64
	anisotropy float64
	field      float64
	levels     int
	seed       uint64
	out        string
	format     string
	json       string
	page       string
	plain      bool
}

func main() {
	s := settings{}
	t1, t2 := "", ""
	flag.StringVar(&s.lattice, "lattice", "square", "square, triangular, kagome or honeycomb")
	flag.StringVar(&t1, "t1", "3,3", "first period of the cluster, in units of the vectors of the lattice")
	flag.StringVar(&t2, "t2", "-3,3", "second period")
	flag.Float64Var(&s.j1, "j1", 1, "coupling of nearest neighbours, antiferromagnetic if positive")
	flag.Float64Var(&s.j2, "j2", 0, "coupling of next neighbours")
	flag.Float64Var(&s.anisotropy, "anisotropy", 1, "coupling of the z components, in units of the others")
	flag.Float64Var(&s.field, "field", 0, "field along z, in the unit of the couplings")
	flag.IntVar(&s.levels, "levels", 2, "levels to compute in each sector")
	flag.Uint64Var(&s.seed, "seed", 1, "seed of the start vectors")
	flag.StringVar(&s.out, "out", "tower-results", "folder for figures and archive")
	flag.StringVar(&s.format, "format", "svg", "format of the figures: svg, png or pdf")
	flag.StringVar(&s.json, "json", "", "file for the results as JSON")
	flag.StringVar(&s.page, "page", "", "file for a page with everything on it, such as tower.html")
	flag.BoolVar(&s.plain, "plain", false, "write the page without times and versions and date the archive 1970, so that their bytes repeat")
	flag.Parse()

	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	err := s.periods(t1, t2)
	if err == nil {
		err = study(ctx, s)
	}
	stop()
	if err != nil {
		fmt.Fprintln(os.Stderr, "tower:", err)
		os.Exit(1)
	}
}

// periods reads the period vectors.
func (s *settings) periods(t1, t2 string) error {
	for i, text := range []string{t1, t2} {
		var v [2]int
		if n, err := fmt.Sscanf(text, "%d,%d", &v[0], &v[1]); n != 2 || err != nil {
			return fmt.Errorf("-t%d %q: give two integers, such as 3,-3", i+1, text)
		}
		if i == 0 {
			s.t1 = v
		} else {
			s.t2 = v
		}
	}
	return nil
}

// study runs the whole job.
func study(ctx context.Context, s settings) error {
	if err := s.check(); err != nil {
		return err
	}
	m, err := newMagnet(s)
	if err != nil {
		return err
	}
	if err := os.MkdirAll(s.out, 0o777); err != nil {
		return err
	}
	fmt.Println(m.cluster)
	bar := progress.Terminal(os.Stderr)
	defer bar.Close()
	sectors, err := m.sectors()
	if err != nil {
		return err
	}
	if err := solve(ctx, s, m, sectors, bar); err != nil {
		return err
	}
	bar.Close()
	levels := gathered(sectors)
	printLevels(m, sectors, levels)
	ground := sectors[levels[0].sector]
	correlations, err := correlate(ctx, m, ground, bar)
	if err != nil {
		return err
	}
	peaks, period := structureFactor(m, correlations)
	printPeaks(peaks)
	return publish(s, m, sectors, levels, structureMap(s, m, peaks, period), bondDrawing(s, m, correlations))
}

// check reports flags that cannot be used.
func (s settings) check() error {
	for name, x := range map[string]float64{"j1": s.j1, "j2": s.j2, "anisotropy": s.anisotropy, "field": s.field} {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return fmt.Errorf("-%s %v: give a finite number", name, x)
		}
	}
	if s.levels < 1 {
		return fmt.Errorf("-levels %d: at least one level a sector is needed", s.levels)
	}
	return nil
}

func (s settings) path(name string) string { return filepath.Join(s.out, name) }
