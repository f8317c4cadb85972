package archive

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"sync"
	"time"

	"github.com/klauspost/compress/zstd"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/operator"
)

// Program is written into files as what made them.
const Program = "Ketloom 0.1.0"

// Sector is what is written together: eigenpairs of an operator in a basis.
type Sector struct {
	Basis    *basis.Basis
	Operator operator.Operator
	Result   *lanczos.Result // its levels, all with vectors
	Notes    map[string]string
}

// Writer writes an archive. Call [Writer.Close] to put the file at its place, or
// [Writer.Discard] to leave nothing. A Writer is used by one goroutine.
type Writer struct {
	path    string
	file    *os.File
	offset  int64
	encoder *zstd.Encoder
	body    contents
	chunks  []chunkEntry
	vectors int
	failed  error
	raw     []byte
	packed  []byte
}

// open holds the writers whose temporary files exist.
var open struct {
	sync.Mutex
	files map[string]bool
}

// Create begins an archive at a path. The bytes go to a temporary file in the
// same folder until Close. Errors: the folder does not exist or cannot be
// written.
func Create(path string) (*Writer, error) {
	if path == "" {
		return nil, errors.New("archive: no path; name the file to write")
	}
	file, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+".*.partial")
	if err != nil {
		return nil, fmt.Errorf("archive: creating %s: %w", path, err)
	}
	remember(file.Name())
	w := &Writer{path: path, file: file}
	w.encoder, err = zstd.NewWriter(nil, zstd.WithEncoderLevel(zstd.SpeedFastest), zstd.WithEncoderConcurrency(1),
		zstd.WithEncoderCRC(true), zstd.WithSingleSegment(true), zstd.WithAllLitEntropyCompression(true))
	if err != nil {
		w.Discard()
		return nil, fmt.Errorf("archive: %w", err)
	}
	text, err := json.Marshal(head{Program, runtime.Version(), time.Now().UTC().Format(time.RFC3339)})
	if err != nil {
		w.Discard()
		return nil, fmt.Errorf("archive: %w", err)
	}
	payload := binary.LittleEndian.AppendUint16([]byte(headMagic), version)
	payload = binary.LittleEndian.AppendUint16(payload, 0)
	if err := w.write(sealed(append(payload, text...))); err != nil {
		w.Discard()
		return nil, err
	}
	return w, nil
}

func remember(name string) {
	open.Lock()
	defer open.Unlock()
	if open.files == nil {
		open.files = map[string]bool{}
	}
	open.files[name] = true
}

func forget(name string) {
	open.Lock()
	defer open.Unlock()
	delete(open.files, name)
}

// DiscardOpen removes the temporary files of all archives that are being
// written, for a program that must leave at once. Their writers are useless
// afterwards.
func DiscardOpen() {
	open.Lock()
	defer open.Unlock()
	for name := range open.files {
		os.Remove(name)
	}
	open.files = nil
}

// write appends bytes to the file; after an error the writer takes no more.
func (w *Writer) write(data []byte) error {
	if w.failed != nil {
		return w.failed
	}
	n, err := w.file.Write(data)
	w.offset += int64(n)
	if err != nil {
		w.failed = fmt.Errorf("archive: writing %s: %w", w.path, err)
	}
	return w.failed
}

// Note adds a note to the file, such as the name of the model. A later note of
// the same key replaces it.
func (w *Writer) Note(key, value string) {
	if w.body.Notes == nil {
		w.body.Notes = map[string]string{}
	}
	w.body.Notes[key] = value
}

// Add writes a sector with all the levels of its result. Nothing is kept of the
// arguments.
//
// Errors: a missing basis or result, an operator with an error or of another
// space, levels without vectors, vectors of the wrong length or that are not
// finite. After an error of the disk the archive can only be discarded.
func (w *Writer) Add(s Sector) error {
	if w.file == nil {
		return errors.New("archive: adding to an archive that is closed or discarded")
	}
	if err := s.check(); err != nil {
		return err
	}
	form, err := s.form()
	if err != nil {
		return err
	}
	for j, v := range s.Result.Vectors {
		vec, err := w.addVector(v)
		if err != nil {
			return err
		}
		l := s.Result.Levels[j]
		vec.Energy, vec.Residual, vec.Bound = l.Energy, l.Residual, l.Bound
		form.Vectors = append(form.Vectors, vec)
	}
	w.body.Sectors = append(w.body.Sectors, form)
	return nil
}

func (s Sector) check() error {
	if s.Basis == nil || s.Result == nil {
		return errors.New("archive: a sector needs a basis and a result")
	}
	if err := s.Operator.Err(); err != nil {
		return fmt.Errorf("archive: the operator of the sector: %w", err)
	}
	if space := s.Operator.Space(); space != nil && !space.Equal(s.Basis.Space()) {
		return errors.New("archive: operator and basis of the sector belong to different spaces")
	}
	if len(s.Result.Vectors) != len(s.Result.Levels) || len(s.Result.Levels) == 0 {
		return fmt.Errorf("archive: %d levels with %d vectors; give a result with one vector a level", len(s.Result.Levels), len(s.Result.Vectors))
	}
	for j, v := range s.Result.Vectors {
		if v.Len() != s.Basis.Len() {
			return fmt.Errorf("archive: vector %d has %d amplitudes, the basis has %d states", j, v.Len(), s.Basis.Len())
		}
		l := s.Result.Levels[j]
		for _, x := range []float64{l.Energy, l.Residual, l.Bound} {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				return fmt.Errorf("archive: level %d has numbers that are not finite: %+v", j, l)
			}
		}
	}
	return nil
}

// form describes the sector, without its vectors.
func (s Sector) form() (sectorForm, error) {
	b, err := s.Basis.MarshalJSON()
	if err != nil {
		return sectorForm{}, fmt.Errorf("archive: describing the basis: %w", err)
	}
	op, err := s.Operator.MarshalJSON()
	if err != nil {
		return sectorForm{}, fmt.Errorf("archive: describing the operator: %w", err)
	}
	digest := sha256.Sum256(op)
	return sectorForm{
		Basis: b, Fingerprint: s.Basis.Fingerprint(), Dimension: s.Basis.Len(), GroupOrder: s.Basis.GroupOrder(),
		Operator: op, Digest: hex.EncodeToString(digest[:]),
		Solver: s.Result, Conventions: conventions, Notes: s.Notes,
	}, nil
}

// addVector writes the chunks of a vector.
func (w *Writer) addVector(v lanczos.Vector) (vectorForm, error) {
	form := vectorForm{Complex: v.Real == nil, Values: int64(v.Len()), First: len(w.chunks)}
	if form.Complex {
		form.Values *= 2
	}
	hash := sha256.New()
	norm := 0.0
	for first := int64(0); first < form.Values; first += chunkValues {
		count := min(form.Values-first, chunkValues)
		w.raw = w.raw[:0]
		for n := first; n < first+count; n++ {
			x := valueOf(v, n)
			if math.IsNaN(x) || math.IsInf(x, 0) {
				return form, fmt.Errorf("archive: amplitude %d of the vector is not finite", n)
			}
			norm += x * x
			w.raw = binary.LittleEndian.AppendUint64(w.raw, math.Float64bits(x))
		}
		hash.Write(w.raw)
		if err := w.addChunk(form.Chunks, uint32(count)); err != nil {
			return form, err
		}
		form.Chunks++
	}
	form.Norm, form.Digest = math.Sqrt(norm), hex.EncodeToString(hash.Sum(nil))
	w.vectors++
	return form, nil
}

// valueOf returns the n-th float64 of a vector.
func valueOf(v lanczos.Vector, n int64) float64 {
	switch {
	case v.Real != nil:
		return v.Real[n]
	case n%2 == 0:
		return real(v.Complex[n/2])
	}
	return imag(v.Complex[n/2])
}

// addChunk compresses w.raw and writes it behind its descriptor.
func (w *Writer) addChunk(number int, values uint32) error {
	w.packed = w.encoder.EncodeAll(w.raw, w.packed[:0])
	entry := chunkEntry{length: int64(len(w.packed)), values: values, crc: sum(w.packed)}
	if err := w.write(descriptor(w.vectors, number, entry)); err != nil {
		return err
	}
	entry.offset = w.offset
	if err := w.write(w.packed); err != nil {
		return err
	}
	w.chunks = append(w.chunks, entry)
	return nil
}

// descriptor returns the skippable frame before a chunk.
func descriptor(vector, number int, e chunkEntry) []byte {
	payload := binary.LittleEndian.AppendUint32(nil, uint32(vector))
	payload = binary.LittleEndian.AppendUint32(payload, uint32(number))
	payload = binary.LittleEndian.AppendUint32(payload, e.values)
	payload = binary.LittleEndian.AppendUint32(payload, 0)
	payload = binary.LittleEndian.AppendUint64(payload, uint64(e.length))
	payload = binary.LittleEndian.AppendUint32(payload, e.crc)
	payload = binary.LittleEndian.AppendUint32(payload, 0)
	return sealed(payload)
}

// Close writes the index, brings the file to the disk and puts it at its place.
// If it fails, nothing is left, and an older file of the name is as it was.
func (w *Writer) Close() error {
	if w.file == nil {
		return errors.New("archive: closing an archive that is closed or discarded")
	}
	if err := w.finish(); err != nil {
		w.Discard()
		return err
	}
	name := w.file.Name()
	if err := w.file.Close(); err != nil {
		w.Discard()
		return fmt.Errorf("archive: writing %s: %w", w.path, err)
	}
	if err := os.Rename(name, w.path); err != nil {
		w.Discard()
		return fmt.Errorf("archive: %w", err)
	}
	forget(name)
	w.release()
	return syncFolder(filepath.Dir(w.path))
}

// finish writes index and trailer.
func (w *Writer) finish() error {
	index, err := encodeIndex(w.body, w.chunks)
	if err != nil {
		return err
	}
	payload := []byte(trailerMagic)
	payload = binary.LittleEndian.AppendUint64(payload, uint64(w.offset))
	payload = binary.LittleEndian.AppendUint64(payload, uint64(len(index)))
	payload = binary.LittleEndian.AppendUint64(payload, uint64(w.offset+int64(len(index))+frameHead+trailerSize))
	payload = binary.LittleEndian.AppendUint32(payload, 0)
	if err := w.write(append(index, sealed(payload)...)); err != nil {
		return err
	}
	if err := w.file.Chmod(0o644); err != nil {
		return fmt.Errorf("archive: writing %s: %w", w.path, err)
	}
	if err := w.file.Sync(); err != nil {
		return fmt.Errorf("archive: writing %s: %w", w.path, err)
	}
	return nil
}

// syncFolder makes the rename last; systems that cannot are left alone.
func syncFolder(folder string) error {
	f, err := os.Open(folder)
	if err != nil {
		return nil
	}
	defer f.Close()
	_ = f.Sync()
	return nil
}

// Discard drops the archive and removes its temporary file. After Close it does
// nothing.
func (w *Writer) Discard() {
	if w.file == nil {
		return
	}
	name := w.file.Name()
	w.file.Close()
	os.Remove(name)
	forget(name)
	w.release()
}

func (w *Writer) release() {
	if w.encoder != nil {
		w.encoder.Close()
	}
	w.file = nil
}
