package archive

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"os"

	"github.com/klauspost/compress/zstd"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator"
)

// File is an open archive. Its methods may be called from many goroutines until
// Close.
type File struct {
	source  io.ReaderAt
	closer  io.Closer
	size    int64
	head    head
	body    contents
	chunks  []chunkEntry
	index   int64 // offset of the INDEX frame
	headEnd int64
	decoder *zstd.Decoder
	budget  int64
}

// DefaultBudget is the largest number of bytes of a vector that is read whole,
// unless [File.SetBudget] says otherwise: 16 GiB. A small file can honestly hold
// a huge vector of zeros.
const DefaultBudget = 16 << 30

// SetBudget changes the largest number of bytes of a vector that is read whole.
// It must not be called while vectors are being read.
func (f *File) SetBudget(bytes int64) { f.budget = bytes }

// Open opens the archive at a path and reads its descriptions, but no vector.
// Close must be called. Files that are no archives, cut off or changed in their
// structure are refused with an error that wraps [ErrDamaged].
func Open(path string) (*File, error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, fmt.Errorf("archive: %w", err)
	}
	info, err := file.Stat()
	if err == nil && !info.Mode().IsRegular() {
		err = errors.New("not a regular file")
	}
	if err != nil {
		file.Close()
		return nil, fmt.Errorf("archive: opening %s: %w", path, err)
	}
	f, err := Read(file, info.Size())
	if err != nil {
		file.Close()
		return nil, fmt.Errorf("archive: opening %s: %w", path, err)
	}
	f.closer = file
	return f, nil
}

// Read opens an archive of the given size that any source holds; see [Open].
func Read(source io.ReaderAt, size int64) (*File, error) {
	f := &File{source: source, size: size, budget: DefaultBudget}
	if err := f.readHead(); err != nil {
		return nil, err
	}
	if err := f.readIndex(); err != nil {
		return nil, err
	}
	var err error
	f.decoder, err = zstd.NewReader(nil, zstd.WithDecoderConcurrency(0), zstd.WithDecodeAllCapLimit(true))
	if err != nil {
		return nil, err
	}
	return f, nil
}

// readHead checks magic, version and flags.
func (f *File) readHead() error {
	const fixed = frameHead + len(headMagic) + 4
	start := make([]byte, fixed)
	if f.size < int64(fixed) {
		return fmt.Errorf("%w: %d bytes are too few for one", ErrDamaged, f.size)
	}
	if _, err := f.source.ReadAt(start, 0); err != nil {
		return fmt.Errorf("%w: %w", ErrDamaged, err)
	}
	if string(start[frameHead:frameHead+len(headMagic)]) != headMagic {
		return fmt.Errorf("%w: it does not begin as an archive of Ketloom does", ErrDamaged)
	}
	rest := start[frameHead+len(headMagic):]
	if v := binary.LittleEndian.Uint16(rest); v != version {
		return fmt.Errorf("%w: version %d of the format, this program reads version %d; use a newer Ketloom", ErrDamaged, v, version)
	}
	if flags := binary.LittleEndian.Uint16(rest[2:]); flags != 0 {
		return fmt.Errorf("%w: the file needs abilities (flags %#x) that this program does not have; use a newer Ketloom", ErrDamaged, flags)
	}
	f.headEnd = frameHead + int64(binary.LittleEndian.Uint32(start[4:]))
	if f.headEnd > f.size {
		return fmt.Errorf("%w: it ends within its head", ErrDamaged)
	}
	payload, err := readSealed(f.source, 0, f.headEnd, mostMetadata)
	if err != nil {
		return err
	}
	if len(payload) < len(headMagic)+4 {
		return fmt.Errorf("%w: its head is too short", ErrDamaged)
	}
	if err := json.Unmarshal(payload[len(headMagic)+4:], &f.head); err != nil {
		return fmt.Errorf("%w: its head is not readable: %w", ErrDamaged, err)
	}
	return nil
}

// readIndex finds the index from the end of the file.
func (f *File) readIndex() error {
	const whole = frameHead + trailerSize
	if f.size < f.headEnd+whole {
		return fmt.Errorf("%w: it is cut off", ErrDamaged)
	}
	t, err := readSealed(f.source, f.size-whole, whole, whole)
	if err != nil {
		return fmt.Errorf("no end of an archive stands at the end of the file, it may be cut off or have been added to: %w", err)
	}
	offset, length := binary.LittleEndian.Uint64(t[8:]), binary.LittleEndian.Uint64(t[16:])
	if string(t[:8]) != trailerMagic || binary.LittleEndian.Uint64(t[24:]) != uint64(f.size) || binary.LittleEndian.Uint32(t[32:]) != 0 {
		return fmt.Errorf("%w: its end belongs to another file or length", ErrDamaged)
	}
	if length > mostIndex || offset > uint64(f.size) || offset+length != uint64(f.size-whole) || offset < uint64(f.headEnd) {
		return fmt.Errorf("%w: the index is said to have %d bytes at %d", ErrDamaged, length, offset)
	}
	f.index = int64(offset)
	payload, err := readSealed(f.source, f.index, int64(length), mostIndex)
	if err != nil {
		return err
	}
	f.body, f.chunks, err = decodeIndex(payload, f.index)
	return err
}

// Close releases the file.
func (f *File) Close() error {
	if f.decoder != nil {
		f.decoder.Close()
	}
	if f.closer == nil {
		return nil
	}
	closer := f.closer
	f.closer = nil
	if err := closer.Close(); err != nil {
		return fmt.Errorf("archive: %w", err)
	}
	return nil
}

// Program, GoVersion and Created tell what wrote the file, and when (UTC).
func (f *File) Program() string { return f.head.Program }

// GoVersion returns the version of Go that the writing program was built with.
func (f *File) GoVersion() string { return f.head.Go }

// Created returns when the file was begun, in UTC as RFC 3339 writes it.
func (f *File) Created() string { return f.head.Created }

// Note returns a note of the file, empty if there is none of the key.
func (f *File) Note(key string) string { return f.body.Notes[key] }

// Sectors returns the number of sectors.
func (f *File) Sectors() int { return len(f.body.Sectors) }

// Stored is a sector of an open archive.
type Stored struct {
	file *File
	form sectorForm
}

// Sector returns sector i.
func (f *File) Sector(i int) (*Stored, error) {
	if i < 0 || i >= len(f.body.Sectors) {
		return nil, fmt.Errorf("archive: sector %d; the file has %d", i, len(f.body.Sectors))
	}
	return &Stored{f, f.body.Sectors[i]}, nil
}

// Len returns the number of eigenpairs.
func (s *Stored) Len() int { return len(s.form.Vectors) }

// Dimension returns the number of states of the basis.
func (s *Stored) Dimension() int { return s.form.Dimension }

// Fingerprint returns the fingerprint of the basis.
func (s *Stored) Fingerprint() string { return s.form.Fingerprint }

// Level returns energy, residual and bound of eigenpair j, 0 <= j < Len().
func (s *Stored) Level(j int) lanczos.Level {
	v := s.form.Vectors[j]
	return lanczos.Level{Energy: v.Energy, Residual: v.Residual, Bound: v.Bound}
}

// Solver returns the result of the solver as it was written, without vectors.
func (s *Stored) Solver() *lanczos.Result { return s.form.Solver }

// Note returns a note of the sector, empty if there is none of the key.
func (s *Stored) Note(key string) string { return s.form.Notes[key] }

// Basis makes the basis of the sector anew and checks dimension and fingerprint.
func (s *Stored) Basis(ctx context.Context, opts *basis.Options) (*basis.Basis, error) {
	b, err := basis.Decode(ctx, s.form.Basis, opts)
	if err != nil {
		return nil, fmt.Errorf("archive: making the basis: %w", err)
	}
	if b.Len() != s.form.Dimension || b.Fingerprint() != s.form.Fingerprint || b.GroupOrder() != s.form.GroupOrder {
		return nil, fmt.Errorf("%w: the basis comes out as another one (%d states, the file says %d)", ErrDamaged, b.Len(), s.form.Dimension)
	}
	return b, nil
}

// Operator returns the operator of the sector and checks its SHA-256.
func (s *Stored) Operator() (operator.Operator, error) {
	digest := sha256.Sum256(s.form.Operator)
	if hex.EncodeToString(digest[:]) != s.form.Digest {
		return operator.Operator{}, fmt.Errorf("%w: the operator is not the one that was written", ErrDamaged)
	}
	var d struct {
		Sites json.RawMessage `json:"sites"`
	}
	if err := json.Unmarshal(s.form.Basis, &d); err != nil {
		return operator.Operator{}, fmt.Errorf("%w: %w", ErrDamaged, err)
	}
	space, err := basis.DecodeSpace(d.Sites)
	if err != nil {
		return operator.Operator{}, fmt.Errorf("archive: making the space: %w", err)
	}
	return operator.Decode(space, s.form.Operator)
}

// Vector reads eigenvector j whole and checks its SHA-256; other vectors are not
// touched. Cost: its size, and one chunk beside.
func (s *Stored) Vector(j int) (lanczos.Vector, error) {
	if j < 0 || j >= s.Len() {
		return lanczos.Vector{}, fmt.Errorf("archive: vector %d; the sector has %d", j, s.Len())
	}
	v := s.form.Vectors[j]
	if v.Values*8 > s.file.budget {
		return lanczos.Vector{}, fmt.Errorf("archive: vector %d takes %d MiB, more than the budget of %d MiB; raise it with SetBudget", j, v.Values>>17, s.file.budget>>20)
	}
	hash := sha256.New()
	var out lanczos.Vector
	var wanted []float64
	for k := range v.Chunks {
		raw, err := s.file.chunk(v.First + k)
		if err != nil {
			return out, fmt.Errorf("archive: vector %d: %w", j, err)
		}
		hash.Write(raw)
		if k == 0 { // the first chunk is intact: now there is reason to believe the size
			out, wanted = allocate(v)
		}
		if err := decode(raw, out, wanted, int64(k)*chunkValues); err != nil {
			return lanczos.Vector{}, err
		}
	}
	if hex.EncodeToString(hash.Sum(nil)) != v.Digest {
		return lanczos.Vector{}, fmt.Errorf("%w: the amplitudes of vector %d are not those that were written", ErrDamaged, j)
	}
	return out, nil
}

// allocate makes room for a vector.
func allocate(v vectorForm) (lanczos.Vector, []float64) {
	if v.Complex {
		return lanczos.Vector{Complex: make([]complex128, v.Values/2)}, nil
	}
	values := make([]float64, v.Values)
	return lanczos.Vector{Real: values}, values
}

// decode puts the values of a chunk into the vector, from value `first` on.
func decode(raw []byte, out lanczos.Vector, re []float64, first int64) error {
	for n := 0; n < len(raw)/8; n++ {
		x := math.Float64frombits(binary.LittleEndian.Uint64(raw[8*n:]))
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return fmt.Errorf("%w: an amplitude is not finite", ErrDamaged)
		}
		at := first + int64(n)
		switch {
		case re != nil:
			re[at] = x
		case at%2 == 0:
			out.Complex[at/2] = complex(x, imag(out.Complex[at/2]))
		default:
			out.Complex[at/2] = complex(real(out.Complex[at/2]), x)
		}
	}
	return nil
}

// chunk reads, checks and unpacks one chunk.
func (f *File) chunk(i int) ([]byte, error) {
	k := f.chunks[i]
	packed := make([]byte, k.length)
	if _, err := f.source.ReadAt(packed, k.offset); err != nil {
		return nil, fmt.Errorf("%w: chunk %d: %w", ErrDamaged, i, err)
	}
	if sum(packed) != k.crc {
		return nil, fmt.Errorf("%w: the checksum of chunk %d does not agree", ErrDamaged, i)
	}
	var h zstd.Header
	if err := h.Decode(packed); err != nil || h.Skippable || !h.HasFCS || h.FrameContentSize != uint64(k.values)*8 {
		return nil, fmt.Errorf("%w: chunk %d does not hold %d values", ErrDamaged, i, k.values)
	}
	raw, err := f.decoder.DecodeAll(packed, make([]byte, 0, int(k.values)*8))
	if err != nil {
		return nil, fmt.Errorf("%w: chunk %d: %w", ErrDamaged, i, err)
	}
	if len(raw) != int(k.values)*8 {
		return nil, fmt.Errorf("%w: chunk %d unpacks to %d bytes", ErrDamaged, i, len(raw))
	}
	return raw, nil
}

// Verify reads the whole file and accounts for every byte: the frames follow
// each other without gaps, every descriptor says what the index says, every
// checksum and every SHA-256 agrees. It returns nil or the first disagreement.
// Bases are not enumerated; see [Stored.Basis].
func (f *File) Verify(ctx context.Context) error {
	at := f.headEnd
	vector, number := 0, 0
	var ends []int
	for _, s := range f.body.Sectors {
		for _, v := range s.Vectors {
			ends = append(ends, v.First+v.Chunks)
		}
	}
	for i, k := range f.chunks {
		if err := ctx.Err(); err != nil {
			return err
		}
		if i == ends[vector] {
			vector, number = vector+1, 0
		}
		want := descriptor(vector, number, k)
		got := make([]byte, len(want))
		if _, err := f.source.ReadAt(got, at); err != nil {
			return fmt.Errorf("archive: %w: descriptor of chunk %d: %w", ErrDamaged, i, err)
		}
		if !bytes.Equal(got, want) || k.offset != at+int64(len(want)) {
			return fmt.Errorf("archive: %w: the descriptor of chunk %d differs from the index", ErrDamaged, i)
		}
		at = k.offset + k.length
		number++
	}
	if at != f.index {
		return fmt.Errorf("archive: %w: %d bytes before the index belong to nothing", ErrDamaged, f.index-at)
	}
	for i := range f.body.Sectors {
		s, err := f.Sector(i)
		if err != nil {
			return err
		}
		if _, err := s.Operator(); err != nil {
			return err
		}
		for j := range s.Len() {
			if err := ctx.Err(); err != nil {
				return err
			}
			if _, err := s.Vector(j); err != nil {
				return err
			}
		}
	}
	return nil
}
