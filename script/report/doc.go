// Package report draws figures and prints tables from plain numbers: energy
// against momentum sector or total spin, levels against flux, entanglement level
// against momentum with its counting, entropy against the cut, spectral functions
// along a path, structure factors over the Brillouin zone, clusters with their
// correlations, level statistics, extrapolations in the size, and the convergence of a
// run. Each gives its numbers as a Table, too.
//
//	figure := report.SectorSpectrum{
//		Sectors:  []report.Sector{{Label: "(0,0)", Levels: zero}, {Label: "(1,0)", Levels: one}},
//		Energy:   report.Axis{Unit: "V"},
//		Manifold: report.BelowLargestGap, ShadeGap: true,
//	}
//	err := figure.Save("spectrum.pdf")
//
// # Files
//
// The ending of the file chooses between SVG, PNG and PDF; [Table] knows txt and
// csv. A file is complete or absent: it is written beside its place and renamed.
// The same data give the same bytes; no file holds a date of its making. SVG
// and PNG also carry title and note of the figure as text.
//
// # Look
//
// Figures are 86 mm wide and 65 mm high unless [Page] says otherwise, which is
// one column of most journals, with letters of 6 to 8 points. Series take the
// eight colours of M. Okabe and K. Ito, Color Universal Design (2008), printed by
// B. Wong, Nature Methods 8, 441 (2011), which readers with any usual colour
// vision tell apart; series differ in marker or tone as well. Axis lines span the
// range of the axis and nothing more, after E. R. Tufte, The Visual Display of
// Quantitative Information (Graphics Press, 1983).
//
// Letters are drawn as outlines of the Liberation Sans font, so that a figure
// looks the same everywhere and Greek letters work in all three formats; its text
// cannot be selected or searched.
//
// # Labels
//
// Titles, labels and notes are Unicode text on one line (a note is broken into
// lines). In them _{...} lowers and ^{...} raises what stands in the braces, as in
// "Energy (V_{1})"; groups do not nest. A sign that the font lacks is an error.
//
// # What to know
//
// Nothing is left out in silence: levels beyond the ends of a given axis are
// counted in the key, and what does not fit is an error that says so.
//
// Ticks with many equal leading digits are shortened: the title then reads
// "Energy + 24.43 V (10^{−3} V)", that is, the number at a tick is the sum of the
// energy and 24.43 V in units of 10⁻³ V.
//
// Errors wrap [ErrData] (numbers, labels), [ErrFormat] (ending) or [ErrSize] (it
// does not fit the page), or are those of the file system.
//
// This package imports nothing of the module.
package report
