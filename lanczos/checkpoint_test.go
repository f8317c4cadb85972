package lanczos

import (
	"bytes"
	"context"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"
)

// stopping counts the products of an operator and calls stop at one of them.
type stopping struct {
	Operator
	left int
	stop func()
}

func (o *stopping) count() {
	if o.left--; o.left == 0 {
		o.stop()
	}
}

func (o *stopping) Apply(dst, src []float64) {
	o.count()
	o.Operator.Apply(dst, src)
}

func (o *stopping) ApplyComplex(dst, src []complex128) {
	o.count()
	o.Operator.ApplyComplex(dst, src)
}

func sameResult(a, b *Result) bool {
	same := slices.Equal(a.Levels, b.Levels) && a.Products == b.Products && a.Check == b.Check && a.CutMultiplet == b.CutMultiplet && len(a.Vectors) == len(b.Vectors)
	for j := range a.Vectors {
		same = same && slices.Equal(a.Vectors[j].Real, b.Vectors[j].Real) && slices.Equal(a.Vectors[j].Complex, b.Vectors[j].Complex)
	}
	return same
}

// A search that is stopped, saved, loaded and resumed, again and again, ends with the
// bits of one that never stopped.
func TestResumedSearchesHaveTheSameBits(t *testing.T) {
	const n, k = 700, 3
	for _, isComplex := range []bool{false, true} {
		op := scrambled(n, isComplex)
		opts := Options{Krylov: 13}
		whole, err := Lowest(context.Background(), op, k, &opts)
		if err != nil {
			t.Fatal(err)
		}
		for _, every := range []int{3, 17, 40} {
			path := filepath.Join(t.TempDir(), "state")
			var result *Result
			stops := 0
			for result == nil {
				ctx, cancel := context.WithCancel(context.Background())
				now := opts
				now.CheckpointEvery = time.Nanosecond
				saved := 0
				now.Checkpoint = func(c *Checkpoint) error { saved++; return c.Save(path) }
				if stops > 0 {
					if now.Resume, err = LoadCheckpoint(path); err != nil {
						t.Fatal(err)
					}
				}
				// Checking runs begin anew, so that the last stretches are longer.
				r, err := Lowest(ctx, &stopping{op, every + 10*stops, cancel}, k, &now)
				cancel()
				switch {
				case err == nil:
					result = r
				case !errors.Is(err, context.Canceled):
					t.Fatal(err)
				case saved == 0:
					t.Fatalf("stopped after %v products without a checkpoint", every)
				}
				stops++
			}
			if !sameResult(whole, result) {
				t.Errorf("complex %v, stopped %d times: %v\nnever stopped: %v", isComplex, stops-1, result, whole)
			}
			if stops < 2 {
				t.Errorf("not stopped at all")
			}
		}
	}
}

// The same from a stop at every place of a search.
func TestStopsAtEveryProduct(t *testing.T) {
	op := scrambled(400, false)
	opts := Options{Krylov: 9}
	whole, err := Lowest(context.Background(), op, 2, &opts)
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "state")
	for at := 1; at < whole.Products; at++ {
		os.Remove(path)
		ctx, cancel := context.WithCancel(context.Background())
		stopped := opts
		stopped.Checkpoint = func(c *Checkpoint) error { return c.Save(path) }
		// A stop is noticed before a product or between two restarts.
		if at%2 == 0 {
			stopped.CheckpointEvery = 1
		}
		_, err := Lowest(ctx, &stopping{op, at, cancel}, 2, &stopped)
		cancel()
		if err == nil {
			continue // the last products compute residuals
		}
		if !errors.Is(err, context.Canceled) {
			t.Fatal(err)
		}
		resumed := opts
		if resumed.Resume, err = LoadCheckpoint(path); err != nil {
			t.Fatal(err)
		}
		result, err := Lowest(context.Background(), op, 2, &resumed)
		if err != nil || !sameResult(whole, result) {
			t.Fatalf("stopped at product %d: %v, %v\nnever stopped: %v", at, err, result, whole)
		}
	}
}

// A hook may end the context itself.
func TestStopInTheHook(t *testing.T) {
	op := scrambled(400, false)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	r, err := Lowest(ctx, op, 2, &Options{Krylov: 9, CheckpointEvery: 1, Checkpoint: func(*Checkpoint) error { cancel(); return nil }})
	if !errors.Is(err, context.Canceled) || r == nil {
		t.Errorf("%v, %v", r, err)
	}
}

func TestForeignCheckpointsAreRefused(t *testing.T) {
	path := filepath.Join(t.TempDir(), "state")
	save := func(op Operator, k int, opts Options) {
		t.Helper()
		ctx, cancel := context.WithCancel(context.Background())
		defer cancel()
		opts.Checkpoint = func(c *Checkpoint) error { return c.Save(path) }
		if _, err := Lowest(ctx, &stopping{op, 12, cancel}, k, &opts); !errors.Is(err, context.Canceled) {
			t.Fatal(err)
		}
	}
	save(chain(900), 2, Options{Krylov: 20})
	c, err := LoadCheckpoint(path)
	if err != nil || c.Products() != 12 || !strings.Contains(c.String(), "12 products") {
		t.Fatalf("%v, %v", c, err)
	}
	for name, try := range map[string]func() error{
		"another operator": func() error {
			_, err := Lowest(context.Background(), scrambled(900, false), 2, &Options{Krylov: 20, Resume: c})
			return err
		},
		"another dimension": func() error {
			_, err := Lowest(context.Background(), chain(901), 2, &Options{Krylov: 20, Resume: c})
			return err
		},
		"other levels": func() error {
			_, err := Lowest(context.Background(), chain(900), 3, &Options{Krylov: 20, Resume: c})
			return err
		},
		"another space": func() error {
			_, err := Lowest(context.Background(), chain(900), 2, &Options{Krylov: 21, Resume: c})
			return err
		},
		"complex": func() error {
			_, err := Lowest(context.Background(), scrambled(900, true), 2, &Options{Krylov: 20, Resume: c})
			return err
		},
	} {
		if err := try(); !errors.Is(err, ErrArgument) || !strings.Contains(err.Error(), "start anew") {
			t.Errorf("%s: %v", name, err)
		}
	}
	broken := errors.New("disk full")
	_, err = Lowest(context.Background(), chain(900), 2, &Options{Krylov: 20, CheckpointEvery: 1, Checkpoint: func(*Checkpoint) error { return broken }})
	if !errors.Is(err, broken) {
		t.Errorf("a hook that fails: %v", err)
	}
}

// Every bit of a checkpoint counts: whatever is changed or cut off is refused.
func TestDamagedCheckpointsAreRefused(t *testing.T) {
	path := filepath.Join(t.TempDir(), "state")
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	opts := &Options{Krylov: 8, Checkpoint: func(c *Checkpoint) error { return c.Save(path) }}
	if _, err := Lowest(ctx, &stopping{scrambled(300, false), 5, cancel}, 1, opts); !errors.Is(err, context.Canceled) {
		t.Fatal(err)
	}
	good, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := readCheckpoint(bytes.NewReader(good), int64(len(good))); err != nil {
		t.Fatal(err)
	}
	for at := 0; at < len(good); at += 7 {
		bad := slices.Clone(good)
		bad[at] ^= 1 << (at % 8)
		if _, err := readCheckpoint(bytes.NewReader(bad), int64(len(bad))); err == nil {
			t.Fatalf("byte %d is changed, and nobody notices", at)
		}
		if _, err := readCheckpoint(bytes.NewReader(good[:at]), int64(at)); err == nil {
			t.Fatalf("the first %d bytes pass as a checkpoint", at)
		}
	}
	entries, err := os.ReadDir(filepath.Dir(path))
	if err != nil || len(entries) != 1 {
		t.Errorf("%d files are left, want one (%v)", len(entries), err)
	}
}
