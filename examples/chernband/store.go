package main

import (
	"fmt"
	"time"

	"ketloom/lanczos/archive"
)

// archiveStates keeps the states below the gap, sector by sector.
func archiveStates(s settings, sectors []sector, m manifold) error {
	path := s.path("ground.ket")
	w, err := archive.Create(path)
	if err != nil {
		return err
	}
	if s.plain {
		if err := w.SetCreated(time.Unix(0, 0)); err != nil {
			w.Discard()
			return err
		}
	}
	if err := fillArchive(w, s, sectors, m); err != nil {
		w.Discard()
		return err
	}
	if err := w.Close(); err != nil {
		return err
	}
	fmt.Printf("\narchive    %s\n", path)
	return nil
}

func fillArchive(w *archive.Writer, s settings, sectors []sector, m manifold) error {
	for i, sec := range sectors {
		if m.counts[i] == 0 {
			continue
		}
		kept, all := m.counts[i], sec.result
		below := *all
		below.Levels, below.Vectors = all.Levels[:kept], all.Vectors[:kept]
		if kept < len(all.Levels) { // the level above those that are kept
			below.Check.Next = all.Levels[kept].Energy - all.Levels[kept].Bound
			below.Check.HasNext = true
		}
		err := w.Add(archive.Sector{Basis: sec.basis, Operator: sec.h, Result: &below})
		if err != nil {
			return err
		}
	}
	w.Note("model", s.model)
	w.Note("cells", fmt.Sprintf("%d × %d", s.lx, s.ly))
	w.Note("particles", fmt.Sprint(s.particles))
	return nil
}
