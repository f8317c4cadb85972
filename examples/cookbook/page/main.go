// Page: the levels of a spin ring as a page of its own, with a formula, a table and a
// figure whose numbers can be taken from the page again.
package main

import (
	"context"
	"fmt"
	"log"
	"os"

	"ketloom/basis"
	"ketloom/basis/lattice"
	"ketloom/lanczos"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
	"ketloom/script/report"
	"ketloom/script/report/page"
)

func main() {
	ctx := context.Background()
	const n = 12
	ring, err := lattice.Ring(n)
	if err != nil {
		log.Fatal(err)
	}
	space, err := basis.Uniform(n, basis.SpinHalf())
	if err != nil {
		log.Fatal(err)
	}
	h, err := model.Heisenberg(space, ring, []float64{1})
	if err != nil {
		log.Fatal(err)
	}
	figure := report.SectorSpectrum{Energy: report.Axis{Unit: "J"}, Momentum: "Momentum k (2π/12)"}
	table := report.Table{Title: "Lowest levels", Columns: []report.Column{{Title: "k", Unit: "2π/12"}, {Title: "energy", Unit: "J", Format: "%.8f"}}}
	for k := 0; k < n; k++ {
		b, err := basis.New(ctx, space, basis.Sector{
			Charges:    []basis.ChargeValue{space.TwiceSz().Is(0)},
			Symmetries: ring.Sector(ring.Momentum(k, 0)),
		}, nil)
		if err != nil {
			log.Fatal(err)
		}
		m, err := matrix.New(ctx, h, b, nil)
		if err != nil {
			log.Fatal(err)
		}
		result, err := lanczos.Lowest(ctx, m, 2, nil)
		if err != nil {
			log.Fatal(err)
		}
		var levels []float64
		for _, l := range result.Levels {
			levels = append(levels, l.Energy)
		}
		figure.Sectors = append(figure.Sectors, report.Sector{Label: fmt.Sprint(k), Levels: levels})
		table.Add(k, levels[0])
	}
	p := page.New("Twelve spins on a ring")
	p.Text("The Hamiltonian is $H = J \\sum_i S_i \\cdot S_{i+1}$, the magnetisation zero.")
	p.Figure(figure, "Two lowest levels of each momentum.")
	p.Table(table)
	if err := p.Save("ring.html"); err != nil {
		log.Fatal(err)
	}
	info, err := os.Stat("ring.html")
	if err != nil {
		log.Fatal(err)
	}
	fmt.Println("a page was written:", info.Size() > 10000)
}
