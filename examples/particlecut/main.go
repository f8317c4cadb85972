// Particlecut opens an archive of ground states, and nothing else, and computes
// the particle entanglement spectrum of their equal mixture: the levels below the
// largest gap by momentum sector, beside the number of quasihole states that the
// exclusion rule of the phase predicts.
//
// Methods: Sterdyniak, Regnault, Bernevig, Phys. Rev. Lett. 106, 100405 (2011);
// Regnault, Bernevig, Phys. Rev. X 1, 021014 (2011).
//
// The archive is that of the example chernband. Run it with -h for the flags.
package main

import (
	"context"
	"encoding/json"
	"flag"
	"fmt"
	"math"
	"os"
	"os/signal"

	"ketloom/basis"
	"ketloom/lanczos/archive"
	"ketloom/lanczos/entangle"
	"ketloom/script/progress"
)

// settings are the flags.
type settings struct {
	archive string
	part    int
	most    int
	length  int
	figure  string
	json    string
}

func main() {
	s := settings{}
	flag.StringVar(&s.archive, "archive", "chernband-results/ground.ket", "archive of the ground states")
	flag.IntVar(&s.part, "part", 3, "number of particles in the part")
	flag.IntVar(&s.most, "most", 1, "exclusion rule: at most this many particles …")
	flag.IntVar(&s.length, "range", 3, "… in this many consecutive orbitals")
	flag.StringVar(&s.figure, "figure", "chernband-results/particlecut.svg", "file for the figure (.svg, .png or .pdf), empty for none")
	flag.StringVar(&s.json, "json", "", "file for the results as JSON")
	flag.Parse()

	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	err := study(ctx, s)
	stop()
	if err != nil {
		fmt.Fprintln(os.Stderr, "particlecut:", err)
		os.Exit(1)
	}
}

func study(ctx context.Context, s settings) error {
	if flag.NArg() > 0 {
		return fmt.Errorf("unexpected %q: all settings are flags, see -h", flag.Arg(0))
	}
	states, wrong, err := readStates(ctx, s.archive)
	if err != nil {
		return err
	}
	kx, ky, err := momenta(states[0].Basis())
	if err != nil {
		return err
	}
	bar := progress.Terminal(os.Stderr)
	cut, err := entangle.ParticleCut(ctx, states, s.part, &entangle.Options{Error: wrong, Progress: bar.Report})
	bar.Close()
	if err != nil {
		return err
	}
	expected, err := countExpected(s, kx, ky)
	if err != nil {
		return err
	}
	r := compare(s, cut, expected)
	r.print(s, cut)
	if s.figure != "" {
		if err := r.draw(s, cut); err != nil {
			return err
		}
	}
	if s.json != "" {
		data, err := json.MarshalIndent(r, "", " ")
		if err != nil {
			return err
		}
		return os.WriteFile(s.json, append(data, '\n'), 0o666)
	}
	return nil
}

// readStates returns every state of the archive and a bound on their errors.
func readStates(ctx context.Context, path string) (states []entangle.State, wrong float64, err error) {
	f, err := archive.Open(path)
	if err != nil {
		return nil, 0, err
	}
	states, wrong, err = statesOf(ctx, path, f)
	if closed := f.Close(); err == nil {
		err = closed
	}
	return states, wrong, err
}

// statesOf reads the states sector by sector. An eigenvector with the residual r is
// wrong by at most r divided by the distance to the levels that were left out.
func statesOf(ctx context.Context, path string, f *archive.File) (states []entangle.State, wrong float64, err error) {
	fmt.Printf("archive    model %s, %s cells, %s particles\n", f.Note("model"), f.Note("cells"), f.Note("particles"))
	for i := 0; i < f.Sectors(); i++ {
		sector, err := f.Sector(i)
		if err != nil {
			return nil, 0, err
		}
		b, err := sector.Basis(ctx, nil)
		if err != nil {
			return nil, 0, err
		}
		for j := 0; j < sector.Len(); j++ {
			v, err := sector.Vector(j)
			if err != nil {
				return nil, 0, err
			}
			state, err := entangle.ComplexState(b, v.AsComplex())
			if err != nil {
				return nil, 0, err
			}
			level := sector.Level(j)
			fmt.Printf("state      energy %.10f, %v\n", level.Energy, b)
			states = append(states, state)
			check := sector.Solver().Check
			if check.HasNext && check.Next > level.Energy {
				wrong = math.Max(wrong, level.Residual/(check.Next-level.Energy))
			}
		}
	}
	if len(states) == 0 {
		return nil, 0, fmt.Errorf("%s holds no state", path)
	}
	return states, wrong, nil
}

// momenta returns the charges kx and ky of a basis of orbitals.
func momenta(b *basis.Basis) (kx, ky basis.Charge, err error) {
	for _, q := range b.Sector().Charges {
		switch q.Charge.Name {
		case "kx":
			kx = q.Charge
		case "ky":
			ky = q.Charge
		}
	}
	if kx.Modulus == 0 || ky.Modulus == 0 {
		return kx, ky, fmt.Errorf("the states of the archive have no momenta kx and ky; it must hold states of orbitals that carry them")
	}
	return kx, ky, nil
}
