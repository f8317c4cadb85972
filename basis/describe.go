package basis

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
)

// description is the JSON form of a basis: everything it is made from, and its
// dimension as a check.
type description struct {
	Sites     []siteRun `json:"sites"`
	Sector    Sector    `json:"sector"`
	Dimension int       `json:"dimension"`
}

// siteRun is a number of equal neighbouring sites.
type siteRun struct {
	Site
	Count int `json:"count"`
}

func (s *Space) runs() []siteRun {
	var runs []siteRun
	for _, site := range s.sites {
		if n := len(runs); n > 0 && runs[n-1].Site == site {
			runs[n-1].Count++
			continue
		}
		runs = append(runs, siteRun{site, 1})
	}
	return runs
}

func spaceOf(runs []siteRun) (*Space, error) {
	var sites []Site
	for _, run := range runs {
		if run.Count < 1 || run.Count > MostBits || len(sites)+run.Count > MostBits {
			return nil, fmt.Errorf("basis: a description with a run of %d sites; 1 … %d sites are possible", run.Count, MostBits)
		}
		for range run.Count {
			sites = append(sites, run.Site)
		}
	}
	return NewSpace(sites)
}

// MarshalJSON describes the space: runs of equal sites.
func (s *Space) MarshalJSON() ([]byte, error) { return json.Marshal(s.runs()) }

// DecodeSpace rebuilds a space from its JSON description.
func DecodeSpace(data []byte) (*Space, error) {
	var runs []siteRun
	if err := json.Unmarshal(data, &runs); err != nil {
		return nil, fmt.Errorf("basis: not the description of a space: %w", err)
	}
	return spaceOf(runs)
}

// MarshalJSON describes the basis: sites, charges with their values,
// symmetries with their eigenvalues, constraints and the dimension. [Decode]
// makes the same basis from it.
func (b *Basis) MarshalJSON() ([]byte, error) {
	return json.Marshal(description{b.space.runs(), b.sector, b.length})
}

// Decode makes the basis that a JSON description stands for. It refuses a
// description whose dimension is not what the sector has.
func Decode(ctx context.Context, data []byte, opts *Options) (*Basis, error) {
	var d description
	if err := json.Unmarshal(data, &d); err != nil {
		return nil, fmt.Errorf("basis: not the description of a basis: %w", err)
	}
	space, err := spaceOf(d.Sites)
	if err != nil {
		return nil, err
	}
	b, err := New(ctx, space, d.Sector, opts)
	if err != nil {
		return nil, err
	}
	if b.length != d.Dimension {
		return nil, fmt.Errorf("basis: the description says %d states, its sector has %d; the description is damaged", d.Dimension, b.length)
	}
	return b, nil
}

// Fingerprint returns the SHA-256 of the JSON description, in hexadecimal
// digits: equal for two bases that are made from the same words.
func (b *Basis) Fingerprint() string {
	data, err := b.MarshalJSON()
	if err != nil { // a description holds nothing that JSON cannot write
		panic("basis: a description cannot be written")
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:])
}
