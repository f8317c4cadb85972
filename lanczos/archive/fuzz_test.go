package archive

import (
	"bytes"
	"testing"

	"ketloom/basis"
)

// Whatever the bytes are, reading ends with an error or with vectors; nothing
// panics, hangs or takes memory that the bytes do not account for. Each input is
// read as it stands, and once more as descriptions in a file whose checksums are
// right.
func FuzzRead(f *testing.F) {
	data := small(f)
	intact := taken(f, data)
	f.Add(data)
	f.Add([]byte(intact.text))
	f.Add([]byte("KETLOOM\r\n\x1a\n\x00"))
	f.Add([]byte(nil))
	f.Fuzz(func(t *testing.T, input []byte) {
		_ = readEverything(t, input)
		p := intact
		p.text = string(input)
		_ = readEverything(t, p.bytes())
	})
}

// readEverything also makes bases and operators.
func readEverything(t *testing.T, data []byte) error {
	if err := readAll(data); err != nil {
		return err
	}
	file, err := Read(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		return err
	}
	defer file.Close()
	for i := range file.Sectors() {
		s, err := file.Sector(i)
		if err != nil {
			return err
		}
		if s.Dimension() > 1<<12 {
			continue
		}
		b, err := s.Basis(t.Context(), &basis.Options{Memory: 1 << 20})
		if err != nil {
			return err
		}
		for j := range s.Len() {
			if err := s.CheckWitnesses(b, j); err != nil {
				return err
			}
		}
	}
	return nil
}
