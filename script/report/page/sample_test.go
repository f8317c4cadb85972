package page

import (
	"os"
	"path/filepath"
	"testing"
	"time"

	"ketloom/script/report"
)

const sampleText = `The band is *flat*; its energy is $E_k = \sqrt{d_x^2+d_y^2}$ with <b>tags</b>,
` + "`code $x$`" + ` and a [link](https://example.org/a?b=1&c=2).

# Model

A long one:

$$
H = \sum_{i<j} V(r_{ij}) n_i n_j
+ \frac{1}{2}\sum_{\langle i,j\rangle} \left( e^{i\phi_{ij}} c_i^\dagger c_j + \text{h.c.} \right)
+ \int_0^\infty \mathrm{d}x\, \hat\psi^\dagger(x)\left[-\frac{\hbar^2}{2m}\partial_x^2\right]\hat\psi(x)
$$

A matrix $\begin{pmatrix} a & b\\ c & -d\end{pmatrix}$, $|\psi\rangle = \ket{\uparrow}$, $\mathbf{k}\cdot\mathbf r$,
$\mathcal H\in\mathbb{C}$, $\sin k_x$, $\lim_{N\to\infty} f'(x)$, and
$$ f(x) = \begin{cases} 0 & x \le 0\\ x^2 & \text{otherwise}\end{cases} \qquad \begin{aligned} a &= b+c\\ &= \binom{n}{k}\end{aligned} $$

## The gap $\Delta$

See [the gap](#section-the-gap) and the [figure](#figure-1); $\vec v\,\bar\psi$ cost \$5.

| k | E | long name of a column | another long name of a column | and one more |
|---|--:|:-:|---|---|
| 0 | 1.5 | *mid* | $\vert a\vert$ | ~~z~~ |

# Results

> Quoted.

- one
- two

` + "```go\nx := 1 // a line of code that does not fit on a phone because it is long, long, long, long, long, long\n```\n"

// sample is a page with one of everything. Its data are invented.
func sample(t *testing.T) (*Page, string) {
	t.Helper()
	folder := t.TempDir()
	stored := filepath.Join(folder, "ground #1.ket")
	if err := os.WriteFile(stored, []byte("abc"), 0o666); err != nil {
		t.Fatal(err)
	}
	p := New(`Chern <band> at "one third"`)
	p.Script = &Script{Files: []File{{"band.go", "package main\n\nfunc main() {} // a < b && c\n"}}, Args: []string{"-l", "3 x 4"}}
	p.now = func() time.Time { return time.Date(2001, 2, 3, 4, 5, 6, 0, time.UTC) }
	p.Text(sampleText)
	levels := report.Table{Title: "Levels in V_{1}", Columns: []report.Column{
		{Title: "Sector"}, {Title: "Energy", Unit: "V_{1}", Format: "%.6f"}, {Title: "Residual of the pair", Unit: "V_{1}", Format: "%.1e"}, {Title: "Products"}, {Title: "Converged"},
	}}
	levels.Add("(0,0)", -24.439397399, 1e-12, 120, true)
	levels.Add("(1,0) & <more>", 3.5, nil, -7, false)
	p.Table(levels)
	p.Figure(report.SectorSpectrum{
		Sectors: []report.Sector{{Label: "(0,0)", Levels: []float64{-3.1, -2.71}}, {Label: "(1,0)", Levels: []float64{-2.75, -2.74}}},
		Energy:  report.Axis{Unit: "V_{1}"}, Manifold: 1, ShadeGap: true,
	}, `Levels *below* the gap $\Delta$, "quoted" <script>alert(1)</script>.`)
	if err := p.Archive(stored, "ground states of $H$"); err != nil {
		t.Fatal(err)
	}
	p.Seed("lanczos", 1)
	p.Timing("matrix", 1234567*time.Microsecond)
	p.Note("Clusters", "two <of> them")
	return p, folder
}
