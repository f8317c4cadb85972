package sweep

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"

	"ketloom/lanczos"
)

var background = context.Background()

func points(n int) []Point {
	var list []Point
	for i := range n {
		list = append(list, Point{Name: fmt.Sprintf("x=%d", i), Values: map[string]float64{"x": float64(i) / 3}})
	}
	return list
}

// square is a function whose results need all digits.
func square(_ context.Context, p Point, _ []lanczos.Vector) (Outcome, error) {
	x := p.Values["x"]
	return Outcome{Numbers: map[string][]float64{"square": {x * x, math.Sqrt(x)}}, Notes: map[string]string{"of": p.Name}}, nil
}

func run(t *testing.T, path string, n int, solve func(context.Context, Point, []lanczos.Vector) (Outcome, error)) []Row {
	t.Helper()
	j, err := Open(path, "squares", nil)
	if err != nil {
		t.Fatal(err)
	}
	defer j.Close()
	rows, err := j.Run(background, points(n), solve)
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

func TestFinishedPointsAreKeptWithAllDigits(t *testing.T) {
	path := filepath.Join(t.TempDir(), "j")
	want := run(t, path, 7, square)
	calls := 0
	got := run(t, path, 9, func(ctx context.Context, p Point, start []lanczos.Vector) (Outcome, error) {
		calls++
		return square(ctx, p, start)
	})
	if calls != 2 || !reflect.DeepEqual(got[:7], want) {
		t.Errorf("%d calls, rows %v, want %v", calls, got, want)
	}
}

// A journal that ends at any byte gives the same rows in the end.
func TestJournalCutAnywhere(t *testing.T) {
	folder := t.TempDir()
	whole := filepath.Join(folder, "whole")
	want := run(t, whole, 4, square)
	data, err := os.ReadFile(whole)
	if err != nil {
		t.Fatal(err)
	}
	for cut := range data {
		path := filepath.Join(folder, "cut")
		if err := os.WriteFile(path, data[:cut], 0o666); err != nil {
			t.Fatal(err)
		}
		if got := run(t, path, 4, square); !reflect.DeepEqual(got, want) {
			t.Fatalf("cut at %d: %v, want %v", cut, got, want)
		}
		if again, err := os.ReadFile(path); err != nil || string(again) != string(data) {
			t.Fatalf("cut at %d: the journal is\n%s\nwant\n%s", cut, again, data)
		}
	}
}

func TestDamageIsFound(t *testing.T) {
	folder := t.TempDir()
	whole := filepath.Join(folder, "whole")
	run(t, whole, 3, square)
	data, err := os.ReadFile(whole)
	if err != nil {
		t.Fatal(err)
	}
	last := strings.LastIndexByte(strings.TrimSuffix(string(data), "\n"), '\n')
	for at := 0; at < last; at++ {
		changed := append([]byte(nil), data...)
		changed[at] ^= 1
		path := filepath.Join(folder, "changed")
		if err := os.WriteFile(path, changed, 0o666); err != nil {
			t.Fatal(err)
		}
		j, err := Open(path, "squares", nil)
		if err == nil {
			j.Close()
			t.Fatalf("byte %d changed: accepted", at)
		}
		if !errors.Is(err, ErrJournal) {
			t.Fatalf("byte %d changed: %v", at, err)
		}
	}
	for _, text := range []string{"notes of a meeting", "notes of a meeting\n", "\n\n"} {
		path := filepath.Join(folder, "text")
		if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		if _, err := Open(path, "squares", nil); !errors.Is(err, ErrJournal) {
			t.Errorf("%q: %v", text, err)
		}
		if after, err := os.ReadFile(path); err != nil || string(after) != text {
			t.Errorf("%q was changed into %q", text, after)
		}
	}
}

func TestOnlyOneProgramAndOneStudy(t *testing.T) {
	path := filepath.Join(t.TempDir(), "j")
	j, err := Open(path, "squares", nil)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Open(path, "squares", nil); !errors.Is(err, ErrJournal) || !strings.Contains(err.Error(), "another program") {
		t.Errorf("opened twice: %v", err)
	}
	if err := j.Close(); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(path, "cubes", nil); !errors.Is(err, ErrJournal) || !strings.Contains(err.Error(), `"squares", not to "cubes"`) {
		t.Errorf("another study: %v", err)
	}
}

func TestBadPointsAndNumbers(t *testing.T) {
	path := filepath.Join(t.TempDir(), "j")
	run(t, path, 2, square)
	j, err := Open(path, "squares", nil)
	if err != nil {
		t.Fatal(err)
	}
	defer j.Close()
	for says, list := range map[string][]Point{
		"without a name":     {{}},
		"two points":         {{Name: "a"}, {Name: "a"}},
		"must be finite":     {{Name: "a", Values: map[string]float64{"x": math.NaN()}}},
		"now they are":       {{Name: "x=1", Values: map[string]float64{"x": 7}}},
		"only finite number": {{Name: "infinite"}},
		"broken":             {{Name: "failing"}},
	} {
		_, err := j.Run(background, list, func(_ context.Context, p Point, _ []lanczos.Vector) (Outcome, error) {
			if p.Name == "failing" {
				return Outcome{}, errors.New("broken")
			}
			return Outcome{Numbers: map[string][]float64{"y": {math.Inf(1)}}}, nil
		})
		if err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("error %v, want one that says %q", err, says)
		}
	}
	ctx, cancel := context.WithCancel(background)
	cancel()
	if _, err := j.Run(ctx, points(3), square); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

func TestVectorsGoToTheNextPoint(t *testing.T) {
	path := filepath.Join(t.TempDir(), "j")
	var seen []float64
	run(t, path, 4, func(_ context.Context, p Point, start []lanczos.Vector) (Outcome, error) {
		if len(start) > 0 {
			seen = append(seen, start[0].Real[0])
		}
		return Outcome{Vectors: []lanczos.Vector{{Real: []float64{p.Values["x"]}}}}, nil
	})
	if want := []float64{0, 1.0 / 3, 2.0 / 3}; !reflect.DeepEqual(seen, want) {
		t.Errorf("start vectors %v, want %v", seen, want)
	}
}

// A program that is killed at random moments and started again ends with the rows
// of one that was not.
func TestKilledSweeps(t *testing.T) {
	if path := os.Getenv("KETLOOM_SWEEP_JOURNAL"); path != "" {
		run(t, path, 12, func(ctx context.Context, p Point, start []lanczos.Vector) (Outcome, error) {
			time.Sleep(2 * time.Millisecond)
			return square(ctx, p, start)
		})
		return
	}
	folder := t.TempDir()
	want := run(t, filepath.Join(folder, "whole"), 12, square)
	path := filepath.Join(folder, "killed")
	r := rand.New(rand.NewPCG(1, 1))
	for range 15 {
		child := exec.Command(os.Args[0], "-test.run=^TestKilledSweeps$")
		child.Env = append(os.Environ(), "KETLOOM_SWEEP_JOURNAL="+path)
		if err := child.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(time.Duration(r.IntN(25)) * time.Millisecond)
		child.Process.Kill()
		child.Wait()
	}
	if got := run(t, path, 12, square); !reflect.DeepEqual(got, want) {
		t.Errorf("rows %v, want %v", got, want)
	}
}

func ExampleJournal_Run() {
	folder, err := os.MkdirTemp("", "sweep")
	if err != nil {
		fmt.Println(err)
		return
	}
	defer os.RemoveAll(folder)
	j, err := Open(filepath.Join(folder, "springs.journal"), "two springs", nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	defer j.Close()
	list := []Point{{Name: "soft", Values: map[string]float64{"k": 1}}, {Name: "stiff", Values: map[string]float64{"k": 4}}}
	rows, err := j.Run(context.Background(), list, func(ctx context.Context, p Point, start []lanczos.Vector) (Outcome, error) {
		k := p.Values["k"]
		h := lanczos.RealFunc(2, func(dst, src []float64) {
			dst[0], dst[1] = 2*k*src[0]-k*src[1], 2*k*src[1]-k*src[0]
		})
		result, err := lanczos.Lowest(ctx, h, 2, &lanczos.Options{Start: start})
		if err != nil {
			return Outcome{}, err
		}
		return Outcome{Numbers: map[string][]float64{"levels": {result.Levels[0].Energy, result.Levels[1].Energy}}, Vectors: result.Vectors}, nil
	})
	for _, row := range rows {
		fmt.Printf("%s: %.6f\n", row.Name, row.Numbers["levels"])
	}
	fmt.Println(err)
	// Output:
	// soft: [1.000000 3.000000]
	// stiff: [4.000000 12.000000]
	// <nil>
}
