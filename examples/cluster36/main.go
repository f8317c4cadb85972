// Cluster36 finds the ground state of the spin-1/2 Heisenberg antiferromagnet on a
// cluster of up to 36 sites in its most symmetric sector, with the proof that the
// energy is one: momentum zero, invariant under every rotation and reflection of
// the cluster, even or odd under spin inversion.
//
// It says what the calculation will take before it begins, shows how far it is,
// keeps a checkpoint, and goes on from there when it is started again. The square
// lattice of 36 sites takes about 5 GB and some minutes; -sites 16 takes none.
//
// The figures to compare with are those of Schulz, Ziman, Poilblanc, J. Phys. I
// France 6, 675 (1996) for the square, of Bernu, Lecheminant, Lhuillier, Pierre, Phys.
// Rev. B 50, 10048 (1994) for the triangular and of Läuchli, Sudan, Sørensen, Phys.
// Rev. B 83, 212401 (2011) for the kagome lattice, all from memory.
//
// Run it with -h for the flags.
package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"os"
	"os/signal"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
	"ketloom/script/progress"
)

// settings are the flags.
type settings struct {
	lattice string
	sites   int
	odd     bool
	plan    bool
	matrix  int // GiB
	vectors int // GiB
	proof   bool
	state   string
	archive string
	workers int
}

func main() {
	s := settings{}
	flag.StringVar(&s.lattice, "lattice", "square", "square, triangular or kagome")
	flag.IntVar(&s.sites, "sites", 36, "number of sites: 16 or 36, on the others 12 or 36")
	flag.BoolVar(&s.odd, "odd", false, "the sector that is odd under spin inversion instead of the even one")
	flag.BoolVar(&s.plan, "plan", false, "only say what the calculation will take")
	flag.IntVar(&s.matrix, "matrix", 5, "memory for the matrix in GiB; computed on the fly where it does not fit")
	flag.IntVar(&s.vectors, "vectors", 3, "memory for vectors in GiB; more memory, fewer products")
	flag.BoolVar(&s.proof, "proof", false, "also prove that no level below was missed, which takes half as long again")
	flag.StringVar(&s.state, "state", "", "file for checkpoints; the calculation goes on from there if it exists")
	flag.StringVar(&s.archive, "archive", "", "file for the ground state")
	flag.IntVar(&s.workers, "workers", 0, "processors to use, 0 for all; the result is the same")
	flag.Parse()

	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	err := study(ctx, s)
	stop()
	if err != nil {
		fmt.Fprintln(os.Stderr, "cluster36:", err)
		os.Exit(1)
	}
}

// study runs the whole job.
func study(ctx context.Context, s settings) error {
	c, err := cluster(s)
	if err != nil {
		return err
	}
	space, err := basis.Uniform(c.Sites(), basis.SpinHalf())
	if err != nil {
		return err
	}
	sector, err := symmetric(s, c, space)
	if err != nil {
		return err
	}
	h, err := model.Heisenberg(space, c, []float64{1})
	if err != nil {
		return err
	}
	dimension, err := basis.Dimension(space, sector)
	if err != nil {
		return err
	}
	fmt.Println(c)
	fmt.Printf("states by Burnside's formula: %d\n", dimension)

	bar := progress.Terminal(os.Stderr)
	defer bar.Close()
	b, err := basis.New(ctx, space, sector, &basis.Options{Workers: s.workers, Progress: bar.Report})
	if err != nil {
		return err
	}
	fmt.Printf("states enumerated:            %d, %d symmetries, %.1f MB\n", b.Len(), b.GroupOrder(), float64(b.Memory())/1e6)
	opts := &matrix.Options{Memory: int64(s.matrix) << 30, Workers: s.workers, Progress: bar.Report}
	plan, err := matrix.Estimate(h, b, opts)
	if err != nil {
		return err
	}
	fmt.Println("plan:  ", plan)
	if s.plan {
		return nil
	}
	m, err := matrix.New(ctx, h, b, opts)
	if err != nil {
		return err
	}
	fmt.Println("matrix:", m.Plan())
	result, err := ground(ctx, s, m, bar)
	if err != nil {
		return err
	}
	bar.Close()
	report(s, c.Sites(), result)
	if s.archive == "" {
		return nil
	}
	return keep(s, h, b, result)
}

// ground finds the lowest level, from the checkpoint if there is one.
func ground(ctx context.Context, s settings, m *matrix.Matrix, bar *progress.Display) (*lanczos.Result, error) {
	// Without the proof the residual alone bounds the error, so it is made small.
	opts := &lanczos.Options{Tolerance: 1.2e-11, Memory: int64(s.vectors) << 30, Workers: s.workers, Unchecked: !s.proof, Progress: bar.Report}
	if s.state != "" {
		opts.Checkpoint = func(c *lanczos.Checkpoint) error { return c.Save(s.state) }
		old, err := lanczos.LoadCheckpoint(s.state)
		switch {
		case err == nil:
			fmt.Fprintln(os.Stderr, "going on from", s.state+":", old)
			opts.Resume = old
		case !errors.Is(err, os.ErrNotExist):
			return nil, err
		}
	}
	result, err := lanczos.Lowest(ctx, m, 1, opts)
	if errors.Is(err, context.Canceled) && s.state != "" {
		return nil, fmt.Errorf("stopped; start again with -state %s to go on", s.state)
	}
	return result, err
}

// report prints the energy and how well it is known.
func report(s settings, sites int, result *lanczos.Result) {
	level := result.Levels[0]
	fmt.Printf("energy:  %.10f J, %.10f J a site, error below %.1e J\n", level.Energy, level.Energy/float64(sites), level.Bound)
	fmt.Printf("         %d products, residual %.1e J\n", result.Products, level.Residual)
	if known, ok := published[s.lattice]; ok && sites == 36 && !s.odd {
		fmt.Printf("printed: %s J a site\n", known)
	}
}

// published energies of 36 sites, from memory (see above).
var published = map[string]string{"square": "-0.678872", "triangular": "-0.5603734", "kagome": "-0.438377"}
