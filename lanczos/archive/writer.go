package archive

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"maps"
	"math"
	"os"
	"path/filepath"
	"runtime"
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
	// Result with one vector a level; see [lanczos.Lowest]. To keep some of the
	// levels only, cut Levels and Vectors of a copy.
	Result *lanczos.Result
	// Notes by key. Bytes that are not UTF-8 become U+FFFD.
	Notes map[string]string
}

// Writer writes an archive. Call [Writer.Close] to put the file at its place, or
// [Writer.Discard] to leave nothing. A Writer is used by one goroutine at a time;
// it compresses on all processors.
type Writer struct {
	path    string
	file    *os.File
	created string
	begun   bool // the head is written
	offset  int64
	encoder *zstd.Encoder
	body    contents
	chunks  []chunkEntry
	vectors int
	text    int // bytes of descriptions so far
	failed  error
}

// Create begins an archive at a path. The bytes go to a temporary file in the
// same folder until Close; an older file of that name is kept until then.
// Errors: the folder does not exist or cannot be written, or the path is that of
// a folder or device.
func Create(path string) (*Writer, error) {
	if path == "" {
		return nil, errors.New("archive: no path; name the file to write")
	}
	if info, err := os.Stat(path); err == nil && !info.Mode().IsRegular() {
		return nil, fmt.Errorf("archive: %s is no regular file; choose another name", path)
	}
	encoder, err := newEncoder()
	if err != nil {
		return nil, fmt.Errorf("archive: %w", err)
	}
	file, err := createTemporary(path)
	if err != nil {
		return nil, fmt.Errorf("archive: creating %s: %w", path, err)
	}
	return &Writer{path: path, file: file, encoder: encoder, created: time.Now().UTC().Format(time.RFC3339)}, nil
}

// SetCreated replaces the time that the file says it was begun at, so that equal
// contents make equal files. It comes before the first Add.
func (w *Writer) SetCreated(t time.Time) error {
	if w.file == nil || w.begun {
		return errors.New("archive: the time must be set after Create and before the first Add")
	}
	w.created = t.UTC().Format(time.RFC3339)
	return nil
}

// Note adds a note to the file, such as the name of the model. A later note of
// the same key replaces it. Bytes that are not UTF-8 become U+FFFD.
func (w *Writer) Note(key, value string) {
	if w.body.Notes == nil {
		w.body.Notes = map[string]string{}
	}
	w.body.Notes[key] = value
}

// Add writes a sector with all the levels of its result. Nothing is kept of the
// arguments.
//
// Errors: a missing basis, operator or result, an operator with an error or of
// another space, levels without vectors, vectors of the wrong length, numbers
// that are not finite. The archive is then as it was before the call. After an
// error of the disk it can only be discarded.
func (w *Writer) Add(s Sector) error {
	if w.file == nil {
		return errors.New("archive: adding to an archive that is closed or discarded; create another")
	}
	err := s.check()
	if err == nil {
		err = w.add(s)
	}
	if err != nil {
		return fmt.Errorf("archive: adding to %s: %w", w.path, err)
	}
	return nil
}

// add writes a sector; after an error the archive is as it was before.
func (w *Writer) add(s Sector) error {
	form, terms, err := s.describe()
	if err != nil {
		return err
	}
	if err := w.begin(); err != nil {
		return err
	}
	offset, chunks, vectors := w.offset, len(w.chunks), w.vectors
	if form.Vectors, err = w.addVectors(s); err == nil {
		err = w.describe(form, terms)
	}
	if err != nil {
		w.chunks, w.vectors = w.chunks[:chunks], vectors
		w.rewind(offset)
	}
	return err
}

func (s Sector) check() error {
	if s.Basis == nil || s.Result == nil {
		return errors.New("a sector needs a basis and a result")
	}
	if err := s.Operator.Err(); err != nil {
		return fmt.Errorf("the operator of the sector: %w", err)
	}
	if s.Operator.Space() == nil {
		return errors.New("a sector needs its operator")
	}
	if !s.Operator.Space().Equal(s.Basis.Space()) {
		return errors.New("operator and basis of the sector belong to different spaces")
	}
	if len(s.Result.Vectors) != len(s.Result.Levels) || len(s.Result.Levels) == 0 {
		return fmt.Errorf("%d levels with %d vectors; give a result with one vector a level", len(s.Result.Levels), len(s.Result.Vectors))
	}
	for j, v := range s.Result.Vectors {
		if v.Real != nil && v.Complex != nil {
			return fmt.Errorf("vector %d is real and complex; set one of the two", j)
		}
		if v.Len() != s.Basis.Len() {
			return fmt.Errorf("vector %d has %d amplitudes, the basis has %d states", j, v.Len(), s.Basis.Len())
		}
		if l := s.Result.Levels[j]; !finite(l.Energy, l.Residual, l.Bound) {
			return fmt.Errorf("level %d has numbers that are not finite: %+v", j, l)
		}
	}
	return nil
}

// describe returns the description of the sector without its vectors, and the
// terms of its operator.
func (s Sector) describe() (sectorForm, operatorForm, error) {
	fail := func(what string, err error) (sectorForm, operatorForm, error) {
		return sectorForm{}, operatorForm{}, fmt.Errorf("describing the %s: %w", what, err)
	}
	b, err := s.Basis.MarshalJSON()
	if err != nil {
		return fail("basis", err)
	}
	op, err := s.Operator.MarshalJSON()
	if err != nil {
		return fail("operator", err)
	}
	result, err := json.Marshal(s.Result)
	if err != nil {
		return fail("result", err)
	}
	terms := operatorForm{digestOf(op), op}
	return sectorForm{
		Basis: b, Fingerprint: s.Basis.Fingerprint(), Dimension: int64(s.Basis.Len()), GroupOrder: s.Basis.GroupOrder(),
		States: statesDigest(s.Basis), Operator: terms.Digest, Solver: result, Conventions: conventions, Notes: maps.Clone(s.Notes),
	}, terms, nil
}

// describe takes the description of a sector into the index, and its operator
// unless another sector has it.
func (w *Writer) describe(form sectorForm, terms operatorForm) error {
	known := false
	for _, op := range w.body.Operators {
		known = known || op.Digest == terms.Digest
	}
	text, err := json.Marshal(form)
	if err != nil {
		return err
	}
	size := len(text)
	if !known {
		size += len(terms.Terms)
	}
	if w.text+size > mostMetadata-mostHead || len(w.chunks) > mostChunks || w.vectors > mostVectors {
		return fmt.Errorf("the file is full: %d bytes of descriptions, %d chunks, %d vectors; close it and use another", w.text+size, len(w.chunks), w.vectors)
	}
	w.text += size
	if !known {
		w.body.Operators = append(w.body.Operators, terms)
	}
	w.body.Sectors = append(w.body.Sectors, form)
	return nil
}

func (w *Writer) addVectors(s Sector) ([]vectorForm, error) {
	forms := make([]vectorForm, len(s.Result.Vectors))
	for j, v := range s.Result.Vectors {
		form, err := w.addVector(v)
		if err != nil {
			return nil, fmt.Errorf("vector %d: %w", j, err)
		}
		l := s.Result.Levels[j]
		form.Energy, form.Residual, form.Bound = l.Energy, l.Residual, l.Bound
		form.Witnesses = witnessesOf(s.Basis, v)
		forms[j] = form
	}
	return forms, nil
}

// addVector writes the chunks of a vector.
func (w *Writer) addVector(v lanczos.Vector) (vectorForm, error) {
	form := vectorForm{Complex: v.Complex != nil, Values: int64(v.Len()), First: len(w.chunks)}
	if form.Complex {
		form.Values *= 2
	}
	form.Chunks = int((form.Values + chunkValues - 1) / chunkValues)
	hash := sha256.New()
	squares, tops := 0.0, make([]float64, form.Chunks)
	err := inOrder(form.Chunks, func(p *piece) error {
		return packPart(w.encoder, p, partOf(v, p.number))
	}, func(p *piece) error {
		hash.Write(p.words)
		squares += p.squares
		tops[p.number] = p.top
		return w.addChunk(p)
	})
	if err != nil {
		return form, err
	}
	if !finite(squares) {
		return form, errors.New("the norm is too large for a float64; such a vector is not written")
	}
	form.Norm, form.Digest, form.Phase = math.Sqrt(squares), hex.EncodeToString(hash.Sum(nil)), phaseRule(v, tops)
	w.vectors++
	return form, nil
}

// packPart compresses the amplitudes of one chunk.
func packPart(encoder *zstd.Encoder, p *piece, part lanczos.Vector) error {
	ok := false
	if part.Complex != nil {
		p.resize(2 * len(part.Complex))
		p.squares, p.top, ok = putComplexWords(p.words, part.Complex)
	} else {
		p.resize(len(part.Real))
		p.squares, p.top, ok = putWords(p.words, part.Real)
	}
	if !ok {
		return notFinite(part, p.number)
	}
	p.packed, p.coding = pack(encoder, p.words, p.scratch, p.packed)
	return nil
}

// notFinite names the first amplitude of a chunk that is not finite.
func notFinite(part lanczos.Vector, number int) error {
	for i := range part.Len() {
		if z := part.At(i); !finite(real(z), imag(z)) {
			return fmt.Errorf("amplitude %d is %v; only finite numbers are written", number*chunkAmplitudes(part)+i, z)
		}
	}
	panic("archive: an amplitude that is not finite cannot be found")
}

// addChunk writes a compressed chunk behind its descriptor.
func (w *Writer) addChunk(p *piece) error {
	entry := chunkEntry{offset: w.offset + descriptorSize, length: uint32(len(p.packed)), values: uint32(len(p.words) / 8), coding: p.coding, crc: sum(p.packed)}
	if err := w.write(entry.descriptor(w.vectors, p.number)); err != nil {
		return err
	}
	if err := w.write(p.packed); err != nil {
		return err
	}
	w.chunks = append(w.chunks, entry)
	return nil
}

// begin writes the head before anything else.
func (w *Writer) begin() error {
	if w.begun {
		return nil
	}
	data, err := encodeHead(head{Program, runtime.Version(), w.created})
	if err != nil {
		return err
	}
	w.begun = true
	return w.write(data)
}

// write appends bytes to the file; after an error the writer takes no more.
func (w *Writer) write(data []byte) error {
	if w.failed != nil {
		return w.failed
	}
	n, err := w.file.Write(data)
	w.offset += int64(n)
	if err != nil {
		w.failed = err
	}
	return w.failed
}

// rewind drops what stands behind an offset.
func (w *Writer) rewind(offset int64) {
	if w.failed != nil || w.offset == offset {
		return
	}
	err := w.file.Truncate(offset)
	if err == nil {
		_, err = w.file.Seek(offset, io.SeekStart)
	}
	if err != nil {
		w.failed = err
	}
	w.offset = offset
}

// Close writes the index, brings the file to the disk and puts it at its place.
// If it fails, nothing is left, and an older file of the name is as it was.
func (w *Writer) Close() error {
	if w.file == nil {
		return errors.New("archive: closing an archive that is closed or discarded")
	}
	err := w.finish()
	if err == nil {
		err = w.file.Close()
	}
	if err == nil {
		err = commit(w.file.Name(), w.path)
	}
	if err != nil {
		w.Discard()
		return fmt.Errorf("archive: writing %s: %w", w.path, err)
	}
	w.release()
	syncFolder(filepath.Dir(w.path))
	return nil
}

// finish writes index and trailer and waits for the disk.
func (w *Writer) finish() error {
	if err := w.begin(); err != nil {
		return err
	}
	index, err := encodeIndex(w.body, w.chunks)
	if err != nil {
		return err
	}
	offset := w.offset
	if err := w.write(index); err != nil {
		return err
	}
	if err := w.write(encodeTrailer(offset, int64(len(index)))); err != nil {
		return err
	}
	return w.file.Sync()
}

// Discard drops the archive and removes its temporary file. After Close it does
// nothing.
func (w *Writer) Discard() {
	if w.file == nil {
		return
	}
	w.file.Close()
	os.Remove(w.file.Name())
	forget(w.file.Name())
	w.release()
}

func (w *Writer) release() {
	w.encoder.Close()
	w.file = nil
}
