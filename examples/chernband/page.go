package main

import (
	"fmt"

	"ketloom/script/report"
	"ketloom/script/report/page"
)

// writePage gathers the whole study on one page.
func writePage(s settings, sectors []sector, m manifold, flow []flowPoint) error {
	p := page.New("Does this band hold a fractional Chern insulator?")
	p.Reproducible = s.plain
	p.Text(fmt.Sprintf(`%d fermions fill a third of the lowest band of the model *%s* on %d × %d cells and repel
their neighbours,

$$H = V \sum_{\langle ij\rangle} n_i n_j, \qquad V = %g,$$

projected to that band. The scenario is invented; the model is a published one (see the head of the
script below). At this filling a fractional Chern insulator has $q = 3$ ground states on the torus, in
sectors that the rule of *at most one particle in three consecutive orbitals* names, separated by a
gap from all other levels, and turned into one another by flux.

## Levels

`, s.particles, s.model, s.lx, s.ly, s.repulsion))
	if m.below > 0 {
		agree := "agree with"
		if !m.agree {
			agree = "differ from"
		}
		p.Text(fmt.Sprintf("Below the largest gap, $\\Delta = %.6f\\,V$, lie %d levels within $%.6f\\,V$. Their momenta %s the prediction.",
			m.gap, m.below, m.spread, agree))
	} else {
		p.Text("No gap can be stated: too few levels are known without omission.")
	}
	p.Figure(spectrum(s, sectors, m), "Energy by momentum sector; sectors of the prediction are shaded.")
	p.Table(levelTable(sectors))
	if len(flow) > 0 {
		p.Text(fmt.Sprintf("## Flow\n\nOne flux quantum is threaded through the torus along %s.", s.direction))
		p.Figure(spectralFlow(s, flow), "Levels against flux.")
	}
	p.Text("## Archive\n\nThe ground states, with everything that is needed to examine them again:")
	if err := p.Archive(s.path("ground.ket"), fmt.Sprintf("%d eigenvectors below the gap, Hamiltonian, sectors and bounds", m.below)); err != nil {
		return err
	}
	p.Seed("start vectors", s.seed)
	return p.Save(s.page)
}

// levelTable lists all levels with their evidence.
func levelTable(sectors []sector) report.Table {
	t := report.Table{
		Title: "Levels by momentum sector",
		Columns: []report.Column{
			{Title: "kx"}, {Title: "ky"}, {Title: "dimension"}, {Title: "energy", Unit: "V", Format: "%.10f"},
			{Title: "residual", Unit: "V", Format: "%.1e"}, {Title: "bound", Unit: "V", Format: "%.1e"},
		},
	}
	for _, sec := range sectors {
		for _, l := range sec.result.Levels {
			t.Rows = append(t.Rows, []any{sec.kx, sec.ky, sec.basis.Len(), l.Energy, l.Residual, l.Bound})
		}
	}
	return t
}
