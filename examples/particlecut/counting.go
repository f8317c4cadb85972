package main

import (
	"fmt"
	"math"

	"ketloom/basis"
	"ketloom/lanczos/entangle"
	"ketloom/script/report"
)

// results are what is printed, drawn and written as JSON.
type results struct {
	Part     int            `json:"part"`
	Levels   int            `json:"levels"`
	BelowGap int            `json:"below_gap"`
	Expected int            `json:"expected"`
	XiBelow  float64        `json:"xi_below"`
	XiAbove  float64        `json:"xi_above"`
	Sectors  []resultSector `json:"sectors"`
}

type resultSector struct {
	Momentum [2]int `json:"momentum"`
	BelowGap int    `json:"below_gap"`
	Expected int    `json:"expected"`
}

// countExpected counts the admissible configurations of the part by momentum.
func countExpected(s settings, kx, ky basis.Charge) (map[[2]int]int, error) {
	rule := entangle.Exclusion{Most: s.most, Range: s.length, Orbitals: kx.Modulus * ky.Modulus}
	counts, err := rule.OnTorus(s.part, kx.Modulus, ky.Modulus)
	if err != nil {
		return nil, err
	}
	expected := map[[2]int]int{}
	for _, c := range counts {
		expected[[2]int{c.Charges[0], c.Charges[1]}] = int(c.Count)
	}
	return expected, nil
}

// compare puts the levels below the largest gap beside what is expected.
func compare(s settings, cut *entangle.Spectrum, expected map[[2]int]int) results {
	gap := cut.LargestGap()
	below := cut.Below((gap.XiBelow + gap.XiAbove) / 2)
	r := results{Part: s.part, Levels: len(cut.Levels()), BelowGap: gap.Below, XiBelow: gap.XiBelow, XiAbove: gap.XiAbove}
	for i, block := range cut.Blocks {
		k := momentumOf(cut, block)
		r.Sectors = append(r.Sectors, resultSector{k, below[i], expected[k]})
		r.Expected += expected[k]
	}
	return r
}

// momentumOf reads the momentum of a block from its charges.
func momentumOf(cut *entangle.Spectrum, block entangle.Block) [2]int {
	var k [2]int
	for i, name := range cut.Names {
		switch name {
		case "kx":
			k[0] = block.Charges[i]
		case "ky":
			k[1] = block.Charges[i]
		}
	}
	return k
}

func (r results) print(s settings, cut *entangle.Spectrum) {
	fmt.Printf("\nparticle entanglement of %d particles: %d levels\n", r.Part, r.Levels)
	fmt.Printf("levels up to ξ = %.0f can be trusted, by the residuals of the states\n", math.Floor(cut.Trust))
	fmt.Printf("largest gap from ξ = %.6f to %.6f\n\n", r.XiBelow, r.XiAbove)
	fmt.Println("  kx  ky   below the gap   expected")
	agree := r.BelowGap == r.Expected
	for _, sec := range r.Sectors {
		fmt.Printf("%4d%4d%16d%11d\n", sec.Momentum[0], sec.Momentum[1], sec.BelowGap, sec.Expected)
		agree = agree && sec.BelowGap == sec.Expected
	}
	fmt.Printf("   total%16d%11d   (at most %d in %d consecutive orbitals)\n", r.BelowGap, r.Expected, s.most, s.length)
	if agree {
		fmt.Println("\nlevels and counting agree in every sector: yes")
	} else {
		fmt.Println("\nlevels and counting agree in every sector: no")
	}
}

// draw saves the figure of levels by sector.
func (r results) draw(s settings, cut *entangle.Spectrum) error {
	figure := report.EntanglementSpectrum{
		Page: report.Page{
			Width: 150, Height: 95,
			Note: fmt.Sprintf("%d particles in the part; above: levels below the gap / expected", r.Part),
		},
		Below:    r.BelowGap,
		Momentum: "Momentum of the part (k_{x}, k_{y})",
	}
	for i, sec := range r.Sectors {
		row := report.Sector{Label: fmt.Sprintf("(%d,%d)", sec.Momentum[0], sec.Momentum[1])}
		for _, l := range cut.Levels() {
			if l.Block == i {
				row.Levels = append(row.Levels, l.Xi)
			}
		}
		figure.Sectors = append(figure.Sectors, row)
		figure.Expected = append(figure.Expected, sec.Expected)
	}
	if err := figure.Save(s.figure); err != nil {
		return err
	}
	fmt.Printf("figure     %s\n", s.figure)
	return nil
}
