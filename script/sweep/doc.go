// Package sweep runs a function over points - parameters, sectors, sizes - keeps
// each finished point in a journal file, and goes on where it was stopped.
//
//	j, err := sweep.Open("twist.journal", "XXZ ring, 24 sites, delta 0.5", nil)
//	rows, err := j.Run(ctx, points, func(ctx context.Context, p sweep.Point, start []lanczos.Vector) (sweep.Outcome, error) {
//		… // solve at p.Values["twist"], beginning with the vectors in start
//		return sweep.Outcome{Numbers: map[string][]float64{"energy": energies}, Vectors: result.Vectors}, nil
//	})
//	err = j.Close()
//
// Run the same script again after a kill, and finished points are read from the
// journal; the rest is computed. The vectors of a point are handed to the next one
// as start vectors, which saves most of the work where neighbours are alike.
//
// # Format of a journal
//
// One line a record, ended by a line feed:
//
//	CRC-32C of the JSON as eight hexadecimal digits, a blank, one JSON object
//
// The first record is {"format":1,"study":"…"}, the others {"name":"…",
// "values":{…},"numbers":{…},"notes":{…}}. Numbers are written with as many digits
// as give the same float64 back. A last line without its line feed is the trace of
// an interrupted write; it is cut off when the journal is opened.
//
// # Caveats
//
// Vectors are not kept in the journal: after a resumption the first new point
// starts from nothing, so that last digits can differ from an uninterrupted sweep
// within the bounds of the solver. The study's text is the only thing that tells
// one journal from another; change it when the question changes. On systems
// without file locks two programs must not share a journal.
//
// # Arrows
//
// This package may import lanczos.
package sweep
