package report

import (
	"errors"
	"fmt"
	"image/color"
	"io"
	"math"

	"gonum.org/v1/plot/vg"
)

// LatticeSite is a site of a drawn cluster.
type LatticeSite struct {
	Position [2]float64
	// Sublattice chooses the mark.
	Sublattice int
	// Label stands beside the site; empty means none.
	Label string
	// Value colours the site if any site has one other than 0.
	Value float64
}

// LatticeBond joins two sites.
type LatticeBond struct {
	From, To int
	// Displacement from the one to the other along this bond. Where it does not end at To
	// the bond leaves the cluster, and a stub is drawn at both of its ends; zero means the
	// straight way.
	Displacement [2]float64
	// Value colours the bond by sign and size, if any bond has one other than 0.
	Value float64
}

// LatticeDrawing draws a cluster: sites, bonds, and correlations on them,
// such as those of neighbouring spins, as colour and width.
type LatticeDrawing struct {
	Page  Page
	Sites []LatticeSite
	Bonds []LatticeBond
	// Outline is a polygon, such as the parallelogram of the periods; nil means none.
	Outline [][2]float64
	// BondValue and SiteValue are the axes of colours. The bar of bonds is drawn if there
	// are values on bonds, else that of sites. Default titles "Bond" and "Site".
	BondValue, SiteValue Axis
}

// Save writes the figure to a file; the ending svg, png or pdf is its format.
func (f LatticeDrawing) Save(path string) error { return save(path, "LatticeDrawing", f.plan) }

// Write writes the figure in the format svg, png or pdf.
func (f LatticeDrawing) Write(w io.Writer, format string) error {
	return write(w, format, "LatticeDrawing", f.plan)
}

// Data returns sites and bonds: for a site its number, place and value; for a bond the two
// sites, the displacement and the value. Errors: those of Write about the data.
func (f LatticeDrawing) Data() (Table, error) {
	if _, _, err := f.plan(); err != nil {
		return Table{}, err
	}
	t := Table{Columns: []Column{{Title: "kind"}, {Title: "from"}, {Title: "to"}, {Title: "x"}, {Title: "y"}, {Title: "value"}}}
	for i, s := range f.Sites {
		t.Add("site", i, nil, s.Position[0], s.Position[1], s.Value)
	}
	for _, b := range f.Bonds {
		d := f.along(b)
		t.Add("bond", b.From, b.To, d[0], d[1], b.Value)
	}
	return t, nil
}

// along is the displacement of a bond.
func (f LatticeDrawing) along(b LatticeBond) [2]float64 {
	if b.Displacement != [2]float64{} {
		return b.Displacement
	}
	from, to := f.Sites[b.From].Position, f.Sites[b.To].Position
	return [2]float64{to[0] - from[0], to[1] - from[1]}
}

func (f LatticeDrawing) check() error {
	if err := errors.Join(f.Page.filled().check(), f.BondValue.check("bond"), f.SiteValue.check("site")); err != nil {
		return err
	}
	if len(f.Sites) == 0 || len(f.Sites) > 5000 || len(f.Bonds) > 50000 {
		return fmt.Errorf("%w: %d sites and %d bonds; give 1 to 5000 sites and at most 50000 bonds", ErrData, len(f.Sites), len(f.Bonds))
	}
	for i, s := range f.Sites {
		err := errors.Join(checkNumber(fmt.Sprintf("place of site %d", i), s.Position[0]), checkNumber(fmt.Sprintf("place of site %d", i), s.Position[1]),
			checkNumber(fmt.Sprintf("value of site %d", i), s.Value), checkLabel(fmt.Sprintf("label of site %d", i), s.Label))
		if err != nil {
			return err
		}
		if s.Sublattice < 0 {
			return fmt.Errorf("%w: site %d has the sublattice %d; give 0 or more", ErrData, i, s.Sublattice)
		}
	}
	for i, b := range f.Bonds {
		if b.From < 0 || b.To < 0 || b.From >= len(f.Sites) || b.To >= len(f.Sites) {
			return fmt.Errorf("%w: bond %d joins the sites %d and %d; there are the sites 0 to %d", ErrData, i, b.From, b.To, len(f.Sites)-1)
		}
		err := errors.Join(checkNumber(fmt.Sprintf("displacement of bond %d", i), b.Displacement[0]), checkNumber(fmt.Sprintf("displacement of bond %d", i), b.Displacement[1]), checkNumber(fmt.Sprintf("value of bond %d", i), b.Value))
		if err != nil {
			return err
		}
	}
	for i, c := range f.Outline {
		if err := errors.Join(checkNumber(fmt.Sprintf("corner %d", i), c[0]), checkNumber(fmt.Sprintf("corner %d", i), c[1])); err != nil {
			return err
		}
	}
	return nil
}

// segment is a drawn piece of a bond.
type segment struct {
	from, to [2]float64
	value    float64
	stub     bool
}

// stubLength is the part of a bond that is drawn where it leaves the cluster.
const stubLength = 0.38

func (f LatticeDrawing) segments() []segment {
	var list []segment
	for _, b := range f.Bonds {
		d := f.along(b)
		from, to := f.Sites[b.From].Position, f.Sites[b.To].Position
		end := [2]float64{from[0] + d[0], from[1] + d[1]}
		if math.Hypot(end[0]-to[0], end[1]-to[1]) < 1e-6*math.Hypot(d[0], d[1]) {
			list = append(list, segment{from, to, b.Value, false})
			continue
		}
		list = append(list, segment{from, [2]float64{from[0] + stubLength*d[0], from[1] + stubLength*d[1]}, b.Value, true},
			segment{to, [2]float64{to[0] - stubLength*d[0], to[1] - stubLength*d[1]}, b.Value, true})
	}
	return list
}

func (f LatticeDrawing) plan() (*panel, func(), error) {
	if err := f.check(); err != nil {
		return nil, nil, err
	}
	pieces := f.segments()
	lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	reach := func(v [2]float64) {
		for i := range 2 {
			lo[i], hi[i] = math.Min(lo[i], v[i]), math.Max(hi[i], v[i])
		}
	}
	for _, s := range f.Sites {
		reach(s.Position)
	}
	for _, p := range pieces {
		reach(p.from)
		reach(p.to)
	}
	for _, c := range f.Outline {
		reach(c)
	}
	margin := 0.05 * math.Max(hi[0]-lo[0], hi[1]-lo[1])
	if hi == lo {
		margin = 0.5
	}
	bonds, sites := f.bars()
	bar := bonds
	if bar == nil {
		bar = sites
	}
	p, err := frame{
		page: f.Page.filled(), name: "Sites and bonds of a cluster",
		xRange: [2]float64{lo[0] - margin, hi[0] + margin},
		yRange: [2]float64{lo[1] - margin, hi[1] + margin},
		bar:    bar, equal: true, key: func(columns) []entry { return nil },
	}.arrange()
	if err != nil {
		return nil, nil, err
	}
	return p, func() { f.paint(p, pieces, bonds, sites) }, nil
}

// bars returns the colours of bonds and of sites, nil without values.
func (f LatticeDrawing) bars() (bonds, sites *colourBar) {
	var onBonds, onSites []float64
	for _, b := range f.Bonds {
		if b.Value != 0 {
			onBonds = append(onBonds, b.Value)
		}
	}
	for _, s := range f.Sites {
		if s.Value != 0 {
			onSites = append(onSites, s.Value)
		}
	}
	if onBonds != nil {
		bonds = valueBar(f.BondValue.or("Bond"), onBonds)
	}
	if onSites != nil {
		sites = valueBar(f.SiteValue.or("Site"), onSites)
	}
	return bonds, sites
}

func (f LatticeDrawing) paint(p *panel, pieces []segment, bonds, sites *colourBar) {
	p.titles()
	if len(f.Outline) > 1 {
		var outline []vg.Point
		for i := range len(f.Outline) + 1 {
			c := f.Outline[i%len(f.Outline)]
			outline = append(outline, at(p.x.at(c[0]), p.y.at(c[1])))
		}
		p.path(outline, 0.5, muted)
	}
	for _, s := range pieces {
		var c color.RGBA = muted
		thick := 0.8
		if bonds != nil {
			most := math.Max(math.Abs(bonds.lo), math.Abs(bonds.hi))
			c, thick = bonds.colour(s.value), 0.8+3.2*math.Min(1, math.Abs(s.value)/most)
		}
		p.line(p.x.at(s.from[0]), p.y.at(s.from[1]), p.x.at(s.to[0]), p.y.at(s.to[1]), thick, c)
	}
	r := math.Max(1.4, math.Min(3.2, 60/math.Sqrt(float64(len(f.Sites)))/6))
	for _, s := range f.Sites {
		x, y := p.x.at(s.Position[0]), p.y.at(s.Position[1])
		p.marker(s.Sublattice, x, y, r, ink)
		if sites != nil {
			p.marker(s.Sublattice, x, y, r-0.6, sites.colour(s.Value))
		}
		if s.Label != "" {
			p.text(s.Label, countSize, x+r+1, y+1.5, 0, ink)
		}
	}
	if p.bar != nil {
		p.bar.draw(p)
	}
}
