package archive

import (
	"encoding/binary"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"maps"
	"os"
	"slices"

	"github.com/klauspost/compress/zstd"
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
	decoder *zstd.Decoder
	budget  int64
}

// DefaultBudget is the largest number of bytes of a vector that is read at once,
// unless [File.SetBudget] says otherwise: 16 GiB. A small file can honestly hold
// a huge vector of zeros.
const DefaultBudget = 16 << 30

// SetBudget changes the largest number of bytes of a vector that is read at
// once. It must not be called while vectors are being read.
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
	var f *File
	if err == nil {
		f, err = read(file, info.Size())
	}
	if err != nil {
		file.Close()
		return nil, fmt.Errorf("archive: opening %s: %w", path, err)
	}
	f.closer = file
	return f, nil
}

// Read opens an archive of the given size that any source holds; see [Open].
// The source must allow reading from many goroutines, as files and
// [bytes.Reader] do.
func Read(source io.ReaderAt, size int64) (*File, error) {
	f, err := read(source, size)
	if err != nil {
		return nil, fmt.Errorf("archive: %w", err)
	}
	return f, nil
}

func read(source io.ReaderAt, size int64) (*File, error) {
	f := &File{source: source, size: size, budget: DefaultBudget}
	end, err := f.readHead()
	if err != nil {
		return nil, err
	}
	if err := f.readIndex(end); err != nil {
		return nil, err
	}
	f.decoder, err = zstd.NewReader(nil, zstd.WithDecoderConcurrency(0), zstd.WithDecodeAllCapLimit(true))
	return f, err
}

// readHead checks magic, version and flags and returns where the head ends.
func (f *File) readHead() (int64, error) {
	const fixed = frameHead + headFixed
	start := make([]byte, fixed)
	if f.size < int64(fixed) {
		return 0, fmt.Errorf("%w: %d bytes are too few for one", ErrDamaged, f.size)
	}
	if err := readFull(f.source, start, 0); err != nil {
		return 0, err
	}
	if string(start[frameHead:frameHead+len(headMagic)]) != headMagic {
		return 0, fmt.Errorf("%w: it does not begin as an archive of Ketloom does", ErrDamaged)
	}
	rest := start[frameHead+len(headMagic):]
	if v := binary.LittleEndian.Uint16(rest); v != version {
		return 0, fmt.Errorf("%w that this program can read: version %d of the format, this program reads version %d; use a newer Ketloom", ErrDamaged, v, version)
	}
	if flags := binary.LittleEndian.Uint16(rest[2:]); flags != 0 {
		return 0, fmt.Errorf("%w that this program can read: it needs abilities (flags %#x) that this program does not have; use a newer Ketloom", ErrDamaged, flags)
	}
	end := frameHead + int64(binary.LittleEndian.Uint32(start[4:]))
	if end > f.size {
		return 0, fmt.Errorf("%w: it ends within its head", ErrDamaged)
	}
	if end < int64(fixed)+4 {
		return 0, fmt.Errorf("%w: its head is too short", ErrDamaged)
	}
	payload, err := readSealed(f.source, 0, end, mostHead)
	if err != nil {
		return 0, err
	}
	if err := json.Unmarshal(payload[headFixed:], &f.head); err != nil {
		return 0, fmt.Errorf("%w: its head is not readable: %w", ErrDamaged, err)
	}
	return end, nil
}

// readIndex finds the index from the end of the file. begin is the end of the
// head.
func (f *File) readIndex(begin int64) error {
	if f.size < begin+trailerSize {
		return fmt.Errorf("%w: it is cut off", ErrDamaged)
	}
	t, err := readSealed(f.source, f.size-trailerSize, trailerSize, trailerSize)
	if err != nil {
		return fmt.Errorf("no end of an archive stands at the end of the file, which may be cut off or have been added to: %w", err)
	}
	offset, length := binary.LittleEndian.Uint64(t[8:]), binary.LittleEndian.Uint64(t[16:])
	if string(t[:8]) != trailerMagic || binary.LittleEndian.Uint64(t[24:]) != uint64(f.size) {
		return fmt.Errorf("%w: its end belongs to another file or length", ErrDamaged)
	}
	if binary.LittleEndian.Uint64(t[32:]) != 0 || binary.LittleEndian.Uint32(t[40:]) != 0 {
		return fmt.Errorf("%w: its end has contents that version %d does not know", ErrDamaged, version)
	}
	if length > mostIndex || offset > uint64(f.size) || offset+length != uint64(f.size-trailerSize) || offset < uint64(begin) {
		return fmt.Errorf("%w: the index is said to have %d bytes at %d", ErrDamaged, length, offset)
	}
	payload, err := readSealed(f.source, int64(offset), int64(length), mostIndex)
	if err != nil {
		return err
	}
	f.body, f.chunks, err = decodeIndex(payload, begin, int64(offset))
	return err
}

// Close releases the file.
func (f *File) Close() error {
	f.decoder.Close()
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

// Program returns what wrote the file.
func (f *File) Program() string { return f.head.Program }

// GoVersion returns the version of Go that the writing program was built with.
func (f *File) GoVersion() string { return f.head.Go }

// Created returns when the file was begun, in UTC as RFC 3339 writes it.
func (f *File) Created() string { return f.head.Created }

// Note returns a note of the file, empty if there is none of the key.
func (f *File) Note(key string) string { return f.body.Notes[key] }

// NoteKeys returns the keys of the notes of the file, sorted.
func (f *File) NoteKeys() []string { return slices.Sorted(maps.Keys(f.body.Notes)) }

// Sectors returns the number of sectors.
func (f *File) Sectors() int { return len(f.body.Sectors) }

// Sector returns sector i.
func (f *File) Sector(i int) (*Stored, error) {
	if i < 0 || i >= len(f.body.Sectors) {
		return nil, fmt.Errorf("archive: sector %d; the file has %d, counted from 0", i, len(f.body.Sectors))
	}
	return &Stored{f, f.body.Sectors[i]}, nil
}
