package archive

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"math"

	"ketloom/lanczos"
)

// head is the JSON of the HEAD frame.
type head struct {
	Program string `json:"program"`
	Go      string `json:"go"`
	Created string `json:"created"`
}

// contents is the JSON of the INDEX frame.
type contents struct {
	Notes     map[string]string `json:"notes,omitempty"`
	Operators []operatorForm    `json:"operators"`
	Sectors   []sectorForm      `json:"sectors"`
}

// operatorForm is an operator that one or more sectors share.
type operatorForm struct {
	Digest string          `json:"sha256"`
	Terms  json.RawMessage `json:"terms"`
}

// sectorForm describes a sector.
type sectorForm struct {
	Basis       json.RawMessage   `json:"basis"`
	Fingerprint string            `json:"fingerprint"`
	Dimension   int64             `json:"dimension"`
	GroupOrder  int               `json:"group_order"`
	States      string            `json:"states_sha256"`
	Operator    string            `json:"operator_sha256"`
	Solver      json.RawMessage   `json:"solver"`
	Conventions []string          `json:"conventions"`
	Notes       map[string]string `json:"notes,omitempty"`
	Vectors     []vectorForm      `json:"vectors"`
}

// vectorForm describes a vector.
type vectorForm struct {
	Energy    float64   `json:"energy"`
	Residual  float64   `json:"residual"`
	Bound     float64   `json:"bound"`
	Norm      float64   `json:"norm"`
	Phase     string    `json:"phase"`
	Complex   bool      `json:"complex"`
	Values    int64     `json:"values"`
	First     int       `json:"first_chunk"`
	Chunks    int       `json:"chunks"`
	Digest    string    `json:"sha256"`
	Witnesses []witness `json:"witnesses"`
}

// digestOf returns the SHA-256 of data in hexadecimal digits.
func digestOf(data []byte) string {
	digest := sha256.Sum256(data)
	return hex.EncodeToString(digest[:])
}

// The shortest texts of an operator, a sector and a vector. A shorter one ends the
// reading before a structure is made for the next: three bytes of text could else
// ask for a hundred times as much memory.
const (
	leastOperator = 80
	leastSector   = 300
	leastVector   = 150
)

// decodeContents reads the descriptions. What it allocates is a small multiple
// of the text.
func decodeContents(text []byte) (contents, error) {
	var c contents
	var raw struct {
		Notes     map[string]string `json:"notes"`
		Operators json.RawMessage   `json:"operators"`
		Sectors   json.RawMessage   `json:"sectors"`
	}
	if err := json.Unmarshal(text, &raw); err != nil {
		return c, unreadable(err)
	}
	c.Notes = raw.Notes
	err := elements(raw.Operators, leastOperator, func(text []byte) error {
		var op operatorForm
		err := json.Unmarshal(text, &op)
		c.Operators = append(c.Operators, op)
		return err
	})
	if err != nil {
		return c, unreadable(err)
	}
	err = elements(raw.Sectors, leastSector, func(text []byte) error {
		form, err := decodeSector(text)
		c.Sectors = append(c.Sectors, form)
		return err
	})
	if err != nil {
		return c, unreadable(err)
	}
	return c, nil
}

func decodeSector(text []byte) (sectorForm, error) {
	type plain sectorForm
	var raw struct {
		plain
		Vectors json.RawMessage `json:"vectors"`
	}
	if err := json.Unmarshal(text, &raw); err != nil {
		return sectorForm{}, err
	}
	form := sectorForm(raw.plain)
	err := elements(raw.Vectors, leastVector, func(text []byte) error {
		var v vectorForm
		err := json.Unmarshal(text, &v)
		form.Vectors = append(form.Vectors, v)
		return err
	})
	return form, err
}

// elements hands the elements of a JSON list to take, one after the other, and
// refuses those of fewer than least bytes. No list, or null, has none.
func elements(list []byte, least int, take func(text []byte) error) error {
	if len(list) == 0 || bytes.Equal(list, []byte("null")) {
		return nil
	}
	if list[0] != '[' {
		return errors.New("something stands where a list was expected")
	}
	decoder := json.NewDecoder(bytes.NewReader(list))
	if _, err := decoder.Token(); err != nil {
		return err
	}
	for decoder.More() {
		var text json.RawMessage
		if err := decoder.Decode(&text); err != nil {
			return err
		}
		if len(text) < least {
			return fmt.Errorf("%d bytes describe what takes %d at least", len(text), least)
		}
		if err := take(text); err != nil {
			return err
		}
	}
	return nil
}

func unreadable(err error) error {
	return fmt.Errorf("%w: the descriptions are not readable: %w", ErrDamaged, err)
}

// check compares the descriptions with each other and with the chunks.
func (c contents) check(chunks []chunkEntry) error {
	digests := map[string]bool{}
	for i, op := range c.Operators {
		if digestOf(op.Terms) != op.Digest {
			return fmt.Errorf("%w: operator %d is not the one that was written", ErrDamaged, i)
		}
		digests[op.Digest] = true
	}
	for i, s := range c.Sectors {
		if !digests[s.Operator] {
			return fmt.Errorf("%w: sector %d has no operator", ErrDamaged, i)
		}
		if err := s.check(); err != nil {
			return fmt.Errorf("%w: sector %d: %w", ErrDamaged, i, err)
		}
	}
	return c.checkChunks(chunks)
}

// check compares the descriptions of one sector with each other.
func (s sectorForm) check() error {
	if digestOf(s.Basis) != s.Fingerprint {
		return errors.New("the basis is not the one that was written")
	}
	if s.Dimension < 1 || s.Dimension > mostValues || len(s.Vectors) == 0 {
		return fmt.Errorf("%d vectors of dimension %d", len(s.Vectors), s.Dimension)
	}
	r, err := s.solver()
	if err != nil {
		return err
	}
	if len(r.Levels) != len(s.Vectors) {
		return fmt.Errorf("%d levels with %d vectors", len(r.Levels), len(s.Vectors))
	}
	for j, v := range s.Vectors {
		want := s.Dimension
		if v.Complex {
			want *= 2
		}
		if v.Values != want || v.Values > mostValues {
			return fmt.Errorf("vector %d has %d values, its dimension asks for %d", j, v.Values, want)
		}
		if v.level() != r.Levels[j] {
			return fmt.Errorf("level %d is not that of the solver", j)
		}
		if !(v.Norm >= 0) {
			return fmt.Errorf("vector %d has the norm %v", j, v.Norm)
		}
	}
	return nil
}

func (v vectorForm) level() lanczos.Level {
	return lanczos.Level{Energy: v.Energy, Residual: v.Residual, Bound: v.Bound}
}

// solver returns what the solver said, in memory of its own.
func (s sectorForm) solver() (*lanczos.Result, error) {
	r := new(lanczos.Result)
	if bytes.Equal(s.Solver, []byte("null")) {
		return nil, errors.New("no result of a solver")
	}
	if err := json.Unmarshal(s.Solver, r); err != nil {
		return nil, fmt.Errorf("the result of the solver is not readable: %w", err)
	}
	return r, nil
}

// checkChunks demands that every chunk belongs to exactly one vector, in order,
// and that the values add up.
func (c contents) checkChunks(chunks []chunkEntry) error {
	next, vectors := 0, 0
	for i, s := range c.Sectors {
		for j, v := range s.Vectors {
			if vectors++; vectors > mostVectors {
				return fmt.Errorf("%w: more than %d vectors", ErrDamaged, mostVectors)
			}
			if v.First != next || int64(v.Chunks) != (v.Values+chunkValues-1)/chunkValues || v.Chunks > len(chunks)-next {
				return fmt.Errorf("%w: vector %d of sector %d does not fit the chunks", ErrDamaged, j, i)
			}
			for k := range v.Chunks {
				if got, want := int64(chunks[next+k].values), min(v.Values-int64(k)*chunkValues, chunkValues); got != want {
					return fmt.Errorf("%w: chunk %d of vector %d in sector %d has %d values instead of %d", ErrDamaged, k, j, i, got, want)
				}
			}
			next += v.Chunks
		}
	}
	if next != len(chunks) {
		return fmt.Errorf("%w: %d chunks belong to no vector", ErrDamaged, len(chunks)-next)
	}
	return nil
}

// finite reports whether all numbers are.
func finite(numbers ...float64) bool {
	for _, x := range numbers {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return false
		}
	}
	return true
}
