package sweep

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"hash/crc32"
	"os"
)

// ErrJournal is wrapped by the errors for journals that belong to another study, are
// damaged, or are in use.
var ErrJournal = errors.New("the journal cannot be used")

// Options tunes a sweep; nil and zero fields stand for the defaults.
type Options struct {
	// Progress, if not nil, is told how many points are finished.
	Progress func(what string, done, total int64, rate float64)
}

// Journal is an open journal. It is used by one goroutine; Close must be called.
type Journal struct {
	path     string
	file     *os.File
	rows     map[string]Row
	progress func(what string, done, total int64, rate float64)
}

// header is the first record.
type header struct {
	Format int    `json:"format"`
	Study  string `json:"study"`
}

var castagnoli = crc32.MakeTable(crc32.Castagnoli)

// Open opens the journal of a study at a path, or begins one. The study is any text
// that says what is being computed.
//
// Errors: a journal of another study, a damaged one (with the line), one that
// another program has open, or what the file system says.
func Open(path, study string, opts *Options) (*Journal, error) {
	file, err := os.OpenFile(path, os.O_RDWR|os.O_CREATE, 0o666)
	if err != nil {
		return nil, fmt.Errorf("sweep: %w", err)
	}
	j := &Journal{path: path, file: file, rows: map[string]Row{}}
	if opts != nil {
		j.progress = opts.Progress
	}
	if err := j.begin(study); err != nil {
		file.Close()
		return nil, err
	}
	return j, nil
}

func (j *Journal) begin(study string) error {
	if err := lock(j.file); err != nil {
		return fmt.Errorf("sweep: %w: %s is open in another program", ErrJournal, j.path)
	}
	data, err := os.ReadFile(j.path)
	if err != nil {
		return fmt.Errorf("sweep: %w", err)
	}
	end := bytes.LastIndexByte(data, '\n') + 1
	if end < len(data) {
		if !record(data[end:]) {
			return fmt.Errorf("sweep: %w: %s is not a journal", ErrJournal, j.path)
		}
		if err := j.file.Truncate(int64(end)); err != nil {
			return fmt.Errorf("sweep: %w", err)
		}
	}
	if _, err := j.file.Seek(int64(end), 0); err != nil {
		return fmt.Errorf("sweep: %w", err)
	}
	if end == 0 {
		return j.append(header{1, study})
	}
	return j.read(bytes.Split(data[:end-1], []byte{'\n'}), study)
}

// record reports whether text can be the beginning of a record.
func record(text []byte) bool {
	for i, c := range text {
		switch {
		case i < 8 && !(c >= '0' && c <= '9' || c >= 'a' && c <= 'f'):
			return false
		case i == 8 && c != ' ':
			return false
		case i == 9 && c != '{':
			return false
		}
	}
	return true
}

// read takes in the lines of the journal.
func (j *Journal) read(lines [][]byte, study string) error {
	for n, line := range lines {
		damaged := fmt.Errorf("sweep: %w: line %d of %s is damaged; restore the file or remove it", ErrJournal, n+1, j.path)
		if len(line) < 10 || !record(line) || fmt.Sprintf("%08x", crc32.Checksum(line[9:], castagnoli)) != string(line[:8]) {
			return damaged
		}
		if n == 0 {
			var h header
			if err := json.Unmarshal(line[9:], &h); err != nil || h.Format != 1 {
				return damaged
			}
			if h.Study != study {
				return fmt.Errorf("sweep: %w: %s belongs to the study %q, not to %q; name another file", ErrJournal, j.path, h.Study, study)
			}
			continue
		}
		var row Row
		if err := json.Unmarshal(line[9:], &row); err != nil {
			return damaged
		}
		j.rows[row.Name] = row
	}
	return nil
}

// append writes a record and brings it to the disk.
func (j *Journal) append(value any) error {
	text, err := json.Marshal(value)
	if err != nil {
		return fmt.Errorf("sweep: %w", err)
	}
	line := fmt.Sprintf("%08x %s\n", crc32.Checksum(text, castagnoli), text)
	if _, err := j.file.WriteString(line); err != nil {
		return fmt.Errorf("sweep: writing %s: %w", j.path, err)
	}
	if err := j.file.Sync(); err != nil {
		return fmt.Errorf("sweep: writing %s: %w", j.path, err)
	}
	return nil
}

// Close closes the journal; the file stays.
func (j *Journal) Close() error {
	if err := j.file.Close(); err != nil {
		return fmt.Errorf("sweep: %w", err)
	}
	return nil
}
