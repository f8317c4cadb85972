package main

import (
	"encoding/json"
	"fmt"
	"os"
)

// output is the JSON form of the results.
type output struct {
	Model     string         `json:"model"`
	Cluster   [2]int         `json:"cluster"`
	Particles int            `json:"particles"`
	Sectors   []outputSector `json:"sectors"`
	BelowGap  int            `json:"below_gap"`
	Gap       float64        `json:"gap"`
	Spread    float64        `json:"spread"`
	Predicted [][2]int       `json:"predicted"`
	Flow      []outputFlow   `json:"flow"`
}

type outputSector struct {
	Momentum  [2]int        `json:"momentum"`
	Dimension int           `json:"dimension"`
	Levels    []outputLevel `json:"levels"`
}

type outputLevel struct {
	Energy   float64 `json:"energy"`
	Residual float64 `json:"residual"`
	Bound    float64 `json:"bound"`
}

type outputFlow struct {
	Flux     float64   `json:"flux"`
	Momentum [2]int    `json:"momentum"`
	Energies []float64 `json:"energies"`
}

// writeJSON writes the results with energies in full precision.
func writeJSON(s settings, sectors []sector, m manifold, flow []flowPoint) error {
	out := output{
		Model: s.model, Cluster: [2]int{s.lx, s.ly}, Particles: s.particles,
		BelowGap: m.below, Gap: m.gap, Spread: m.spread,
		Predicted: m.predicted, Flow: []outputFlow{},
	}
	if out.Predicted == nil {
		out.Predicted = [][2]int{}
	}
	for _, sec := range sectors {
		row := outputSector{Momentum: [2]int{sec.kx, sec.ky}, Dimension: sec.basis.Len()}
		for _, l := range sec.result.Levels {
			row.Levels = append(row.Levels, outputLevel{l.Energy, l.Residual, l.Bound})
		}
		out.Sectors = append(out.Sectors, row)
	}
	for _, p := range flow {
		out.Flow = append(out.Flow, outputFlow{p.flux, [2]int{p.kx, p.ky}, p.energies})
	}
	data, err := json.MarshalIndent(out, "", " ")
	if err != nil {
		return err
	}
	if err := os.WriteFile(s.json, append(data, '\n'), 0o666); err != nil {
		return err
	}
	fmt.Printf("results    %s\n", s.json)
	return nil
}
