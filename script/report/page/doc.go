// Package page writes reports: one HTML file with prose, formulas, tables, figures
// and links to archives, which needs nothing else to be read, on a screen, on a
// phone or on paper.
//
//	p := page.New("Chern band at one third")
//	p.Text("The band is *flat*; its energy is $E_k = \\sqrt{d_x^2+d_y^2}$.")
//	p.Figure(report.SectorSpectrum{Sectors: sectors}, "Levels below the gap $\\Delta$.")
//	p.Seed("lanczos", 1)
//	err := p.Save("band.html")
//
// # The file
//
// It has no scripts and loads nothing, which its Content-Security-Policy makes
// sure of; letters are those of the system, figures are SVG in place. Links below
// tables and figures give their numbers as CSV (RFC 4180) and the pictures as SVG.
// Colours follow the light or dark setting of the reader; figures keep a white
// plate. A page with three headings or more has a list of them. Prose, captions and
// what an archive holds are Markdown; titles of tables are plain words.
//
// Folded at its end is what made it: the Go files of the script, its arguments,
// seeds, timings and notes, the versions of Ketloom, of Go and of the modules in
// the program, the machine and the time. The interpreter knows the source of
// its script. A compiled program reads it from where it was built, if it is still
// there; else the page says that it was not at hand. Print leaves out what is
// folded, but for the line that is seen. See [Page] for bytes that do not change.
//
// # Formulas
//
// Formulas are a part of TeX, written as MathML Core with the TeX source as
// annotation. Any letter or sign of Unicode may stand for itself, and there are:
//
//	^ _ ' { } ~ \, \: \; \! \quad \qquad
//	\frac \binom \sqrt (with a degree in [ ]) \left \middle \right
//	\sum \prod \int \iint \oint \bigoplus \bigotimes \bigcup \bigcap
//	\alpha ... \Omega \hbar \ell \infty \partial \nabla \Re \Im \emptyset \imath
//	\pm \mp \times \cdot \div \ast \star \circ \bullet \otimes \oplus \wedge \vee \cap \cup \setminus
//	\le \leq \ge \geq \ne \neq \ll \gg \approx \equiv \sim \simeq \cong \propto
//	\in \notin \subset \subseteq \parallel \perp \mid \forall \exists \neg
//	\to \rightarrow \leftarrow \leftrightarrow \uparrow \downarrow \mapsto \Rightarrow \Leftarrow \Leftrightarrow
//	\dagger \prime \degree \colon \ldots \dots \cdots \vdots \ddots
//	\langle \rangle \ket \bra \vert \Vert \lfloor \rfloor \lceil \rceil \| \{ \}
//	\hat \bar \vec \tilde \dot \ddot \check \widehat \widetilde \overline \underline
//	\sin \cos \tan \cot \arcsin \arccos \arctan \sinh \cosh \tanh \exp \log \ln
//	\arg \dim \ker \deg \det \gcd \lim \max \min \sup \inf
//	\text \mathrm \operatorname \mathbf \boldsymbol \mathbb \mathcal
//	\begin{...} \end{...} with matrix, pmatrix, bmatrix, vmatrix, cases, aligned
//
// Anything else is an error that names the command and its place. In a table of
// Markdown a stroke parts cells: write \vert in formulas there.
//
// # What to know
//
// A dollar sign begins a formula; write \$ for the sign. Tags of HTML are shown as
// they were written. The numbers in the page are those it was given; nothing is
// rounded but by the formats of columns, and timings to three digits.
//
// Errors wrap [ErrFormula], [ErrContent], the errors of package report, or are those
// of the file system.
//
// This package may import script/report.
package page
