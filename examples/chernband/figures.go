package main

import (
	"fmt"

	"ketloom/script/report"
)

// sheet returns the size and the note of a figure of this study.
func (s settings) sheet() report.Page {
	return report.Page{
		Width: 120, Height: 80,
		Note: fmt.Sprintf("%s, %d fermions on %d × %d cells, V = %g", s.model, s.particles, s.lx, s.ly, s.repulsion),
	}
}

// spectrum is the figure of energy against momentum sector.
func spectrum(s settings, sectors []sector, m manifold) report.SectorSpectrum {
	figure := report.SectorSpectrum{
		Page:     s.sheet(),
		Energy:   report.Axis{Unit: "V"},
		Manifold: m.below, ShadeGap: m.below > 0,
		Tolerance: 1e-8,
	}
	for _, sec := range sectors {
		row := report.Sector{Label: fmt.Sprintf("(%d,%d)", sec.kx, sec.ky)}
		for _, l := range sec.result.Levels {
			row.Levels = append(row.Levels, l.Energy)
		}
		for _, k := range m.predicted {
			if k[0] == sec.kx && k[1] == sec.ky {
				row.Predicted++
			}
		}
		figure.Sectors = append(figure.Sectors, row)
	}
	return figure
}

// spectralFlow is the figure of energy against flux.
func spectralFlow(s settings, points []flowPoint) report.SpectralFlow {
	figure := report.SpectralFlow{
		Page:     s.sheet(),
		Energy:   report.Axis{Unit: "V"},
		FluxAxis: report.Axis{Title: "Flux through " + s.direction, Unit: "flux quanta"},
		ShadeGap: true,
	}
	for step := 0; step <= s.steps; step++ {
		figure.Flux = append(figure.Flux, float64(step)/float64(s.steps))
	}
	lines := map[string]int{}
	for _, p := range points {
		for j, e := range p.energies {
			name := fmt.Sprintf("(%d,%d) %d", p.kx, p.ky, j)
			at, known := lines[name]
			if !known {
				at = len(figure.Flows)
				lines[name] = at
				line := report.Flow{Manifold: j < p.manifold}
				if line.Manifold {
					line.Name = fmt.Sprintf("(%d,%d)", p.kx, p.ky)
				}
				figure.Flows = append(figure.Flows, line)
			}
			figure.Flows[at].Energies = append(figure.Flows[at].Energies, e)
		}
	}
	return figure
}
