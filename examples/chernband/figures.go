package main

import (
	"fmt"

	"ketloom/script/report"
)

// drawSpectrum draws energy against momentum sector.
func drawSpectrum(s settings, sectors []sector, m manifold) error {
	figure := report.SectorSpectrum{
		Title:  fmt.Sprintf("%s, %d fermions on %d×%d cells", s.model, s.particles, s.lx, s.ly),
		XTitle: "Momentum sector (kx, ky)",
		YTitle: "Energy (V)",
	}
	if m.below > 0 {
		figure.GapLow, figure.GapHigh = m.top, m.top+m.gap
	}
	for i, sec := range sectors {
		row := report.SectorLevels{Label: fmt.Sprintf("(%d,%d)", sec.kx, sec.ky), Below: m.counts[i]}
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
	return figure.Save(s.path("spectrum.svg"))
}

// drawFlow draws energy against flux.
func drawFlow(s settings, points []flowPoint) error {
	figure := report.SpectralFlow{
		Title:  fmt.Sprintf("%s, %d fermions on %d×%d cells", s.model, s.particles, s.lx, s.ly),
		XTitle: "Flux through " + s.direction + " (flux quanta)",
		YTitle: "Energy (V)",
	}
	lines := map[string]int{}
	for _, p := range points {
		for j, e := range p.energies {
			name := fmt.Sprintf("(%d,%d) %d", p.kx, p.ky, j)
			at, known := lines[name]
			if !known {
				at = len(figure.Lines)
				lines[name] = at
				line := report.FlowLine{Manifold: j < p.manifold}
				if line.Manifold {
					line.Label = fmt.Sprintf("(%d,%d)", p.kx, p.ky)
				}
				figure.Lines = append(figure.Lines, line)
			}
			figure.Lines[at].Flux = append(figure.Lines[at].Flux, p.flux)
			figure.Lines[at].Values = append(figure.Lines[at].Values, e)
		}
	}
	return figure.Save(s.path("flow.svg"))
}
