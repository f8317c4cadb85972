package report

import (
	"bytes"
	"encoding/binary"
	"encoding/xml"
	"errors"
	"image"
	"image/png"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"
)

// figure is what every kind of figure can do.
type figure interface {
	Save(path string) error
	Write(w io.Writer, format string) error
	plan() (*panel, func(), error)
}

// specimens returns one figure of each kind, with invented data.
func specimens() map[string]figure {
	return map[string]figure{
		"sectors": SectorSpectrum{
			Page:     Page{Title: "Three sectors & <one> gap", Note: "V_{1} = 1"},
			Sectors:  []Sector{{Label: "(0,0)", Levels: []float64{-4, -4, -1}, Predicted: 2}, {Label: "(1,0)", Levels: []float64{-1.5, 0}}, {}},
			Manifold: BelowLargestGap, ShadeGap: true, Energy: Axis{Unit: "V"},
		},
		"flow": SpectralFlow{
			Flux:   []float64{0, 0.5, 1},
			Levels: [][]float64{{-2, -1, 0}, {-2.1, -1, 0.1}, {-2, -1, 0}}, Manifold: 1, ShadeGap: true,
			Flows: []Flow{{Name: "a", Energies: []float64{-2, -2.1, -2}, Manifold: true}},
		},
		"entanglement": EntanglementSpectrum{
			Sectors: []Sector{{Levels: []float64{3, 4, 12}}, {Levels: []float64{3, 11}}}, Expected: []int{2, 2}, Below: BelowLargestGap,
		},
		"entropy": EntropyProfile{Curves: []EntropyCurve{{Name: "state", Sites: []int{1, 2, 3}, Entropies: []float64{0.5, 0.7, 0.5}}, {Sites: []int{2}, Entropies: []float64{1}}}},
		"tower": Tower{Page: Page{Note: "Invented levels"}, Relative: true, Line: true, Energy: Axis{Unit: "J"}, Series: []TowerSeries{
			{Name: "Γ A1", TwiceS: []int{0, 4, 8}, Energies: []float64{-10, -9.2, -7.4}}, {Name: "M A1", TwiceS: []int{2, 6}, Energies: []float64{-9.75, -8.5}},
			{TwiceS: []int{0, 2}, Energies: []float64{-8.9, -8.7}}}},
		"convergence": Convergence{Tolerance: 1e-9, Value: Axis{Unit: "J"}, Curves: []ConvergenceCurve{
			{Name: "level 0", Steps: []float64{4, 8, 12, 16, 20}, Values: []float64{1, 0.1, 1e-4, 1e-8, 1e-10}}, {Name: "level 1", Steps: []float64{4, 8, 12, 16, 20}, Values: []float64{2, 0.7, 0.02, 1e-4, 0}}}},
		"extrapolation": Extrapolation{Quantity: Axis{Title: "Gap", Unit: "J"}, Series: []ScalingSeries{
			{Name: "tilted", X: []float64{0.1, 0.0625, 0.05, 0.03125}, Y: []float64{0.9, 0.62, 0.55, 0.41}, Errors: []float64{0.02, 0.03, 0.03, 0.05}, Degree: 1},
			{Name: "bare", X: []float64{0.1, 0.05}, Y: []float64{0.5, 0.45}, Degree: 1}, {X: []float64{0.08}, Y: []float64{0.7}, Degree: -1}}},
		"statistics": LevelStatistics{Ratios: []float64{0, 0.1, 0.2, 0.33, 0.41, 0.44, 0.52, 0.58, 0.63, 0.66, 0.7, 0.74, 0.85, 0.93, 1}, Bins: 10, Unitary: true},
		"dispersion": invertedBand(), "structure": squareMap(), "lattice": plaquettes(),
	}
}

func rendered(t *testing.T, f figure, format string) []byte {
	t.Helper()
	var buf bytes.Buffer
	if err := f.Write(&buf, format); err != nil {
		t.Fatal(err)
	}
	return buf.Bytes()
}

func picture(t *testing.T, f figure) image.Image {
	t.Helper()
	img, err := png.Decode(bytes.NewReader(rendered(t, f, "png")))
	if err != nil {
		t.Fatal(err)
	}
	return img
}

func TestSameDataGiveTheSameBytes(t *testing.T) {
	for name, f := range specimens() {
		for _, format := range []string{"svg", "png", "pdf"} {
			want := rendered(t, f, format)
			var wait sync.WaitGroup
			again := make([][]byte, 3)
			for i := range again {
				wait.Go(func() {
					var buf bytes.Buffer
					if f.Write(&buf, format) == nil {
						again[i] = buf.Bytes()
					}
				})
			}
			wait.Wait()
			for _, got := range again {
				if !bytes.Equal(got, want) {
					t.Errorf("%s, %s: the bytes differ from one time to the next", name, format)
				}
			}
		}
	}
}

func TestPDFHoldsNoDateOfItsMaking(t *testing.T) {
	data := rendered(t, specimens()["entropy"], "pdf")
	if n := bytes.Count(data, []byte("(D:20000101000000")); n != 2 || bytes.Count(data, []byte("(D:")) != n {
		t.Errorf("%d constant dates among %d dates, want 2 of 2", n, bytes.Count(data, []byte("(D:")))
	}
}

func TestSVGIsXMLWithTitleAndNote(t *testing.T) {
	var doc struct {
		Width string `xml:"width,attr"`
		Title string `xml:"title"`
		Desc  string `xml:"desc"`
	}
	if err := xml.Unmarshal(rendered(t, specimens()["sectors"], "svg"), &doc); err != nil {
		t.Fatal(err)
	}
	// 86 mm = 243.78 points, by the definition of the inch.
	if doc.Title != "Three sectors & <one> gap" || doc.Desc != "V1 = 1" || doc.Width != "243.78pt" {
		t.Errorf("title %q, note %q, width %q", doc.Title, doc.Desc, doc.Width)
	}
}

func TestPNGHasItsSizeAndText(t *testing.T) {
	data := rendered(t, specimens()["sectors"], "png")
	img := picture(t, specimens()["sectors"])
	// 86 mm and 65 mm at 300 dots per inch.
	if got := img.Bounds().Size(); got != image.Pt(1016, 768) {
		t.Errorf("%v pixels, want 1016×768", got)
	}
	at := bytes.Index(data, []byte("pHYs"))
	if at < 0 || binary.BigEndian.Uint32(data[at+4:]) != 11811 { // 300/0.0254
		t.Error("the resolution is missing or wrong")
	}
	for _, text := range []string{"Three sectors & <one> gap", "V1 = 1"} {
		if !bytes.Contains(data, []byte(text)) {
			t.Errorf("%q is missing", text)
		}
	}
}

func TestSaveFollowsTheEnding(t *testing.T) {
	folder := t.TempDir()
	for ending, start := range map[string]string{"svg": "<?xml", "PNG": "\x89PNG", "pdf": "%PDF"} {
		path := filepath.Join(folder, "figure."+ending)
		for _, f := range specimens() { // the second replaces the first
			if err := f.Save(path); err != nil {
				t.Fatal(err)
			}
		}
		data, err := os.ReadFile(path)
		if err != nil || !strings.HasPrefix(string(data), start) {
			t.Errorf("%s: %v, starts with %q", path, err, data[:min(len(data), 8)])
		}
	}
	if got := listed(t, folder); len(got) != 3 {
		t.Errorf("files %v, want three figures and nothing else", got)
	}
}

func listed(t *testing.T, folder string) []string {
	t.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
	}
	return names
}

func TestFailedSaveLeavesEverythingAsItWas(t *testing.T) {
	folder := t.TempDir()
	old := filepath.Join(folder, "old.png")
	if err := os.WriteFile(old, []byte("old"), 0o600); err != nil {
		t.Fatal(err)
	}
	if err := os.Mkdir(filepath.Join(folder, "folder.svg"), 0o700); err != nil {
		t.Fatal(err)
	}
	good := specimens()["entropy"]
	for _, c := range []struct {
		f    figure
		path string
		want error
		says string
	}{
		{good, filepath.Join(folder, "absent", "a.svg"), fs.ErrNotExist, "there is no folder"},
		{good, filepath.Join(old, "a.svg"), fs.ErrNotExist, "there is no folder"},
		{good, filepath.Join(folder, "folder.svg"), fs.ErrExist, "a folder has this name"},
		{good, filepath.Join(folder, "a.gif"), ErrFormat, `"gif"`},
		{good, filepath.Join(folder, "a"), ErrFormat, `""`},
		{EntropyProfile{}, old, ErrData, "no curves"},
	} {
		err := c.f.Save(c.path)
		if !errors.Is(err, c.want) || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want %v with %q", c.path, err, c.want, c.says)
		}
	}
	if got := listed(t, folder); !slices.Equal(got, []string{"folder.svg", "old.png"}) {
		t.Errorf("files %v after failures", got)
	}
	if data, err := os.ReadFile(old); err != nil || string(data) != "old" {
		t.Errorf("old file holds %q, %v", data, err)
	}
}

type fullDisk struct{}

func (fullDisk) Write([]byte) (int, error) { return 0, errors.New("disk full") }

func TestWriteReportsTheWriter(t *testing.T) {
	for name, f := range specimens() {
		if err := f.Write(fullDisk{}, "svg"); err == nil || !strings.Contains(err.Error(), "disk full") {
			t.Errorf("%s: error %v", name, err)
		}
	}
}
