// Chernband asks whether particles in a flat topological band form a
// fractional Chern insulator, and gathers the evidence: the lowest levels of
// every momentum sector with their error bounds, the number of levels below the
// largest gap beside the prediction of the exclusion rule, their flow under one
// quantum of flux, and an archive of the ground states for later cuts.
//
// The scenario is invented: a design study for a layered material whose
// parameters are chosen by the flags. Models and methods are published ones:
//
//   - bands: Sun, Gu, Katsura, Das Sarma, Phys. Rev. Lett. 106, 236803 (2011);
//     Neupert, Santos, Chamon, Mudry, Phys. Rev. Lett. 106, 236804 (2011);
//     Haldane, Phys. Rev. Lett. 61, 2015 (1988)
//   - prediction of the momenta: Bernevig, Regnault, Phys. Rev. B 85, 075128 (2012)
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

	"ketloom/operator/model"
	"ketloom/script/progress"
)

// settings are the flags.
type settings struct {
	model      string
	lx, ly     int
	particles  int
	repulsion  float64
	dispersion bool
	levels     int
	steps      int
	direction  string
	everywhere bool
	seed       uint64
	out        string
	format     string
	json       string
	page       string
	plain      bool
}

func main() {
	s := settings{}
	flag.StringVar(&s.model, "model", "checkerboard-sun", "band: checkerboard-sun, checkerboard-neupert or haldane")
	flag.IntVar(&s.lx, "lx", 6, "cells along x")
	flag.IntVar(&s.ly, "ly", 4, "cells along y")
	flag.IntVar(&s.particles, "particles", 8, "number of fermions in the band")
	flag.Float64Var(&s.repulsion, "repulsion", 1, "nearest-neighbour repulsion V, the unit of energy if 1")
	flag.BoolVar(&s.dispersion, "dispersion", false, "keep the energies of the band instead of flattening it")
	flag.IntVar(&s.levels, "levels", 3, "levels to compute in each sector; more where the gap asks for it")
	flag.IntVar(&s.steps, "flux", 10, "steps in which one flux quantum is threaded, 0 for none")
	flag.StringVar(&s.direction, "direction", "x", "direction that the flux twists: x or y")
	flag.BoolVar(&s.everywhere, "everywhere", false, "thread flux in all sectors, not only in those of the ground states")
	flag.Uint64Var(&s.seed, "seed", 1, "seed of the start vectors")
	flag.StringVar(&s.out, "out", "chernband-results", "folder for figures and archive")
	flag.StringVar(&s.format, "format", "svg", "format of the figures: svg, png or pdf")
	flag.StringVar(&s.json, "json", "", "file for the results as JSON")
	flag.StringVar(&s.page, "page", "", "file for a page with everything on it, such as chernband.html")
	flag.BoolVar(&s.plain, "plain", false, "write the page without times and versions and date the archive 1970, so that their bytes repeat")
	flag.Parse()

	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	err := study(ctx, s)
	stop()
	if err != nil {
		fmt.Fprintln(os.Stderr, "chernband:", err)
		os.Exit(1)
	}
}

// study runs the whole job.
func study(ctx context.Context, s settings) error {
	if err := s.check(); err != nil {
		return err
	}
	bands, err := s.bands()
	if err != nil {
		return err
	}
	if err := os.MkdirAll(s.out, 0o777); err != nil {
		return err
	}
	bar := progress.Terminal(os.Stderr)
	if err := describeBand(s, bands); err != nil {
		return err
	}
	sectors, err := solveSectors(ctx, s, bands, bar)
	if err != nil {
		return err
	}
	bar.Close()
	printSectors(sectors)
	m, err := findManifold(s, sectors)
	if err != nil {
		return err
	}
	printManifold(sectors, m)

	var flow []flowPoint
	if s.steps > 0 && m.below > 0 {
		flow, err = threadFlux(ctx, s, bands, sectors, m, bar)
		if err != nil {
			return err
		}
		bar.Close()
		printFlow(s, flow)
		if err := spectralFlow(s, flow).Save(s.path("flow." + s.format)); err != nil {
			return err
		}
	}
	if err := spectrum(s, sectors, m).Save(s.path("spectrum." + s.format)); err != nil {
		return err
	}
	if err := archiveStates(s, sectors, m); err != nil {
		return err
	}
	if s.page != "" {
		if err := writePage(s, sectors, m, flow); err != nil {
			return err
		}
	}
	if s.json != "" {
		return writeJSON(s, sectors, m, flow)
	}
	return nil
}

// check reports flags that cannot be used.
func (s settings) check() error {
	switch {
	case s.lx < 1 || s.ly < 1 || s.lx*s.ly > 64:
		return fmt.Errorf("-lx %d -ly %d: at least one cell each way and at most 64 cells are possible", s.lx, s.ly)
	case s.particles < 1 || s.particles > s.lx*s.ly:
		return fmt.Errorf("-particles %d: the band has room for 1 to %d", s.particles, s.lx*s.ly)
	case math.IsNaN(s.repulsion) || math.IsInf(s.repulsion, 0):
		return fmt.Errorf("-repulsion %v: give a finite number", s.repulsion)
	case s.levels < 1:
		return fmt.Errorf("-levels %d: at least one level a sector is needed", s.levels)
	case s.steps < 0:
		return fmt.Errorf("-flux %d: give 0 (none) or a number of steps", s.steps)
	case s.direction != "x" && s.direction != "y":
		return fmt.Errorf("-direction %q: the directions are x and y", s.direction)
	case s.format != "svg" && s.format != "png" && s.format != "pdf":
		return fmt.Errorf("-format %q: the formats are svg, png and pdf", s.format)
	case flag.NArg() > 0:
		return fmt.Errorf("unexpected %q: all settings are flags, see -h", flag.Arg(0))
	}
	return nil
}

// bands returns the model that the flags name.
func (s settings) bands() (model.TightBinding, error) {
	switch s.model {
	case "checkerboard-sun":
		return model.Checkerboard(1, model.SunSecond, model.SunThird, s.repulsion), nil
	case "checkerboard-neupert":
		return model.Checkerboard(1, model.NeupertSecond, 0, s.repulsion), nil
	case "haldane":
		return model.Haldane(1, 0.2, math.Pi/2, 0, s.repulsion), nil
	}
	return model.TightBinding{}, fmt.Errorf("-model %q: the models are checkerboard-sun, checkerboard-neupert and haldane", s.model)
}

// describeBand prints what is studied: the band before interactions.
func describeBand(s settings, bands model.TightBinding) error {
	top, err := bands.Chern(0, 24, 24)
	if err != nil {
		return err
	}
	shape, err := bands.Dispersion(0, 48, 48)
	if err != nil {
		return err
	}
	fmt.Printf("model      %s, %d × %d cells, %d fermions in the lowest band (filling %d/%d), V = %g\n",
		s.model, s.lx, s.ly, s.particles, s.particles, s.lx*s.ly, s.repulsion)
	fmt.Printf("band       Chern number %+d, width %.4f, gap above %.4f, %s\n",
		top.Chern, shape.Width(), shape.GapAbove, map[bool]string{true: "kept", false: "flattened"}[s.dispersion])
	return nil
}

// path returns a place in the output folder.
func (s settings) path(name string) string { return filepath.Join(s.out, name) }
