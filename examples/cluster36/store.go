package main

import (
	"fmt"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/lanczos/archive"
	"ketloom/operator"
)

// keep writes the ground state with all that is needed to read it again.
func keep(s settings, h operator.Operator, b *basis.Basis, result *lanczos.Result) error {
	w, err := archive.Create(s.archive)
	if err != nil {
		return err
	}
	w.Note("lattice", fmt.Sprintf("%s, %d sites", s.lattice, s.sites))
	if err := w.Add(archive.Sector{Basis: b, Operator: h, Result: result}); err != nil {
		w.Discard()
		return err
	}
	if err := w.Close(); err != nil {
		return err
	}
	fmt.Println("archive:", s.archive)
	return nil
}
