package archive

import (
	"encoding/binary"
	"encoding/json"
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
	Notes   map[string]string `json:"notes,omitempty"`
	Sectors []sectorForm      `json:"sectors"`
}

// sectorForm describes a sector.
type sectorForm struct {
	Basis       json.RawMessage   `json:"basis"`
	Fingerprint string            `json:"fingerprint"`
	Dimension   int               `json:"dimension"`
	GroupOrder  int               `json:"group_order"`
	Operator    json.RawMessage   `json:"operator"`
	Digest      string            `json:"operator_sha256"`
	Solver      *lanczos.Result   `json:"solver"`
	Conventions []string          `json:"conventions"`
	Notes       map[string]string `json:"notes,omitempty"`
	Vectors     []vectorForm      `json:"vectors"`
}

// vectorForm describes a vector.
type vectorForm struct {
	Energy   float64 `json:"energy"`
	Residual float64 `json:"residual"`
	Bound    float64 `json:"bound"`
	Norm     float64 `json:"norm"`
	Complex  bool    `json:"complex"`
	Values   int64   `json:"values"`
	First    int     `json:"first_chunk"`
	Chunks   int     `json:"chunks"`
	Digest   string  `json:"sha256"`
}

// conventions say in words what numbers cannot.
var conventions = []string{
	"a configuration is a word of bits, one field a mode, mode 0 lowest; modes are the sites in order, the down modes of electron sites after all others",
	"fermions: |n> = (c_0+)^n0 (c_1+)^n1 ... |0>, modes ascending; a symmetry carries c+_m to its image and keeps |0>",
	"|r~> = N_r^(-1/2) sum_g conj(chi(g)) g|r>, r the smallest configuration of its orbit, N_r = |G| times the order of its stabiliser",
	"a symmetry sends site i to sites[i]; its eigenvalue is exp(2 pi i turn); a translation by a has exp(-i k.a)",
	"amplitude i belongs to |r~> of the i-th smallest representative; psi(c) = psi_i <c|r~>",
	"phase: the first amplitude within 1e-6 of the largest modulus is real and positive",
}

// chunkEntry is the place of a chunk.
type chunkEntry struct {
	offset, length int64
	values         uint32
	crc            uint32
}

// encodeIndex returns the INDEX frame.
func encodeIndex(c contents, chunks []chunkEntry) ([]byte, error) {
	text, err := json.Marshal(c)
	if err != nil {
		return nil, fmt.Errorf("archive: %w", err)
	}
	if len(text) > mostMetadata || len(chunks) > (mostIndex-mostMetadata)/indexEntry {
		return nil, fmt.Errorf("archive: %d bytes of descriptions and %d chunks are more than one file holds; use several files", len(text), len(chunks))
	}
	payload := binary.LittleEndian.AppendUint32(nil, uint32(len(text)))
	payload = append(payload, text...)
	payload = binary.LittleEndian.AppendUint32(payload, uint32(len(chunks)))
	for _, k := range chunks {
		payload = binary.LittleEndian.AppendUint64(payload, uint64(k.offset))
		payload = binary.LittleEndian.AppendUint64(payload, uint64(k.length))
		payload = binary.LittleEndian.AppendUint32(payload, k.values)
		payload = binary.LittleEndian.AppendUint32(payload, k.crc)
	}
	return sealed(payload), nil
}

// decodeIndex reads the payload of an INDEX frame that stands at offset end.
func decodeIndex(payload []byte, end int64) (contents, []chunkEntry, error) {
	var c contents
	damaged := func(what string) (contents, []chunkEntry, error) {
		return c, nil, fmt.Errorf("%w: %s", ErrDamaged, what)
	}
	if len(payload) < 8 {
		return damaged("the index is too short")
	}
	n := int64(binary.LittleEndian.Uint32(payload))
	if n > mostMetadata || 8+n > int64(len(payload)) {
		return damaged(fmt.Sprintf("the index says %d bytes of descriptions", n))
	}
	rest := payload[4+n:]
	count := int64(binary.LittleEndian.Uint32(rest))
	if rest = rest[4:]; int64(len(rest)) != count*indexEntry {
		return damaged(fmt.Sprintf("the index says %d chunks", count))
	}
	chunks := make([]chunkEntry, count)
	free := uint64(0) // end of the chunk before
	for i := range chunks {
		e := rest[i*indexEntry:]
		offset, length := binary.LittleEndian.Uint64(e), binary.LittleEndian.Uint64(e[8:])
		values := binary.LittleEndian.Uint32(e[16:])
		if length > mostFrame || values == 0 || values > chunkValues || offset > uint64(end) || length > uint64(end)-offset {
			return damaged(fmt.Sprintf("chunk %d of %d bytes at %d lies outside of the file or is too large", i, length, offset))
		}
		if offset < free {
			return damaged(fmt.Sprintf("chunk %d overlaps the one before", i))
		}
		free = offset + length
		chunks[i] = chunkEntry{int64(offset), int64(length), values, binary.LittleEndian.Uint32(e[20:])}
	}
	if err := json.Unmarshal(payload[4:4+n], &c); err != nil {
		return damaged("the descriptions are not readable: " + err.Error())
	}
	return c, chunks, c.check(chunks)
}

// check compares the descriptions with the chunks: every chunk belongs to
// exactly one vector, in order, and the values add up.
func (c contents) check(chunks []chunkEntry) error {
	next, vectors := 0, 0
	for s, sector := range c.Sectors {
		for v, vec := range sector.Vectors {
			if vectors++; vectors > mostVectors {
				return fmt.Errorf("%w: more than %d vectors", ErrDamaged, mostVectors)
			}
			want := int64(sector.Dimension)
			if vec.Complex {
				want *= 2
			}
			if sector.Dimension < 1 || vec.Values != want || vec.Values > mostValues || vec.First != next || vec.Chunks < 1 || vec.Chunks > len(chunks)-next {
				return fmt.Errorf("%w: vector %d of sector %d does not fit its dimension and chunks", ErrDamaged, v, s)
			}
			for _, number := range []float64{vec.Energy, vec.Residual, vec.Bound, vec.Norm} {
				if math.IsNaN(number) || math.IsInf(number, 0) {
					return fmt.Errorf("%w: vector %d of sector %d has numbers that are not finite", ErrDamaged, v, s)
				}
			}
			left := vec.Values
			for k := range vec.Chunks {
				if int64(chunks[next+k].values) != min(left, chunkValues) {
					return fmt.Errorf("%w: chunk %d of vector %d in sector %d has %d values", ErrDamaged, k, v, s, chunks[next+k].values)
				}
				left -= int64(chunks[next+k].values)
			}
			if left != 0 {
				return fmt.Errorf("%w: the chunks of vector %d in sector %d are not all of it", ErrDamaged, v, s)
			}
			next += vec.Chunks
		}
	}
	if next != len(chunks) {
		return fmt.Errorf("%w: %d chunks belong to no vector", ErrDamaged, len(chunks)-next)
	}
	return nil
}
