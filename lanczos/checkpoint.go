package lanczos

import (
	"bufio"
	"crypto/sha256"
	"encoding/binary"
	"encoding/json"
	"fmt"
	"hash"
	"io"
	"math"
	"os"
	"path/filepath"
	"time"
)

// DefaultCheckpointEvery is the default of Options.CheckpointEvery.
const DefaultCheckpointEvery = 5 * time.Minute

// Checkpoint is the state of a search, from which Options.Resume goes on as if it had
// never stopped: the result has the same bits. One that a search hands out shares the
// memory of the search and holds only until the hook returns; Save it there. One that
// LoadCheckpoint returns is its own.
type Checkpoint struct {
	state   state
	vectors []Vector // the Krylov vectors, then the found ones
}

// state is all of a checkpoint but the vectors. Names are those of the file.
type state struct {
	Format     string    `json:"format"`
	Dim        int       `json:"dimension"`
	Levels     int       `json:"levels"`
	Krylov     int       `json:"krylov"`
	Complex    bool      `json:"complex"`
	Tolerance  float64   `json:"tolerance"`
	MissChance float64   `json:"missChance"`
	Seed       uint64    `json:"seed"`
	Unchecked  bool      `json:"unchecked"`
	Products   int       `json:"products"`
	Restarts   int       `json:"restarts"`
	Starts     int       `json:"starts"`
	Norm       float64   `json:"norm"`
	Size       int       `json:"size"` // of the projected matrix; its vectors are one more
	Kept       int       `json:"kept"`
	Judged     int       `json:"judged"`
	Alpha      []float64 `json:"alpha"`
	Beta       []float64 `json:"beta"`
	Arrow      []float64 `json:"arrow"`
	Energies   []float64 `json:"energies"` // of the found vectors
	Residuals  []float64 `json:"residuals"`
	Check      Check     `json:"check"`
	Cut        bool      `json:"cut"` // the list ends within a multiplet
}

const checkpointFormat = "ketloom checkpoint 1"

// Products returns the number of products that the search had made.
func (c *Checkpoint) Products() int { return c.state.Products }

// String says where the search stood.
func (c *Checkpoint) String() string {
	return fmt.Sprintf("%d of %d levels of dimension %d set aside after %d products", len(c.state.Energies), c.state.Levels, c.state.Dim, c.state.Products)
}

// Save writes the checkpoint to a file: one line of JSON, the vectors as little-endian
// float64 one after the other (real and imaginary part in turn for complex ones), and
// the SHA-256 of all that. The file is complete or absent: it is written beside its
// place, flushed to the disk and renamed.
func (c *Checkpoint) Save(path string) (err error) {
	f, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+"-*")
	if err != nil {
		return fmt.Errorf("lanczos: checkpoint: %w", err)
	}
	defer func() {
		if err != nil {
			f.Close()
			os.Remove(f.Name())
			err = fmt.Errorf("lanczos: checkpoint: %w", err)
		}
	}()
	if err = c.write(f); err != nil {
		return err
	}
	if err = f.Sync(); err != nil {
		return err
	}
	if err = f.Close(); err != nil {
		return err
	}
	return os.Rename(f.Name(), path)
}

func (c *Checkpoint) write(f io.Writer) error {
	sum := sha256.New()
	w := bufio.NewWriterSize(io.MultiWriter(f, sum), 1<<20)
	head, err := json.Marshal(c.state)
	if err != nil {
		return err
	}
	if _, err := w.Write(append(head, '\n')); err != nil {
		return err
	}
	var word [8]byte
	put := func(x float64) error {
		binary.LittleEndian.PutUint64(word[:], math.Float64bits(x))
		_, err := w.Write(word[:])
		return err
	}
	for _, v := range c.vectors {
		for _, x := range v.Real {
			if err := put(x); err != nil {
				return err
			}
		}
		for _, z := range v.Complex {
			if err := put(real(z)); err != nil {
				return err
			}
			if err := put(imag(z)); err != nil {
				return err
			}
		}
	}
	if err := w.Flush(); err != nil {
		return err
	}
	_, err = f.Write(sum.Sum(nil))
	return err
}

// LoadCheckpoint reads a file that Save wrote. Errors: those of the file system, a
// file that is no checkpoint, is not whole or is damaged.
func LoadCheckpoint(path string) (*Checkpoint, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, fmt.Errorf("lanczos: checkpoint: %w", err)
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, fmt.Errorf("lanczos: checkpoint: %w", err)
	}
	c, err := readCheckpoint(f, info.Size())
	if err != nil {
		return nil, fmt.Errorf("lanczos: checkpoint %s: %w", path, err)
	}
	return c, nil
}

// mostHead bounds the line of JSON.
const mostHead = 1 << 24

func readCheckpoint(f io.Reader, size int64) (*Checkpoint, error) {
	sum := sha256.New()
	r := bufio.NewReaderSize(f, 1<<20)
	head, err := r.ReadSlice('\n')
	for err == bufio.ErrBufferFull && len(head) < mostHead {
		line := append([]byte(nil), head...)
		head, err = r.ReadSlice('\n')
		head = append(line, head...)
	}
	if err != nil {
		return nil, fmt.Errorf("not a checkpoint: no line of JSON at the beginning")
	}
	sum.Write(head)
	c := &Checkpoint{}
	if err := json.Unmarshal(head, &c.state); err != nil || c.state.Format != checkpointFormat {
		return nil, fmt.Errorf("not a checkpoint that this version can read: expected the format %q", checkpointFormat)
	}
	count, err := c.state.vectors()
	if err != nil {
		return nil, err
	}
	bytes := int64(8)
	if c.state.Complex {
		bytes = 16
	}
	if want := int64(len(head)) + int64(count)*int64(c.state.Dim)*bytes + sha256.Size; size != want {
		return nil, fmt.Errorf("%d bytes, expected %d: the file is not whole", size, want)
	}
	for range count {
		v, err := c.readVector(r, sum)
		if err != nil {
			return nil, err
		}
		c.vectors = append(c.vectors, v)
	}
	stored := make([]byte, sha256.Size)
	if _, err := io.ReadFull(r, stored); err != nil {
		return nil, err
	}
	if string(stored) != string(sum.Sum(nil)) {
		return nil, fmt.Errorf("the checksum is wrong: the file is damaged; start anew")
	}
	return c, nil
}

// vectors returns how many vectors follow the head, and checks its numbers.
func (s *state) vectors() (int, error) {
	count := len(s.Energies)
	if s.Size > 0 {
		count += s.Size + 1
	}
	inside := s.Dim > 0 && s.Dim < 1<<40 && s.Levels > 0 && s.Size >= 0 && s.Size <= s.Krylov && s.Krylov < 1<<20 &&
		s.Kept >= 0 && s.Kept <= s.Size && s.Judged >= 0 && s.Judged <= s.Size && len(s.Residuals) == len(s.Energies) &&
		len(s.Alpha) == s.Size && len(s.Beta) == s.Size && len(s.Arrow) == s.Size && count <= 1<<20
	if !inside {
		return 0, fmt.Errorf("the numbers at its beginning contradict each other; the file is damaged")
	}
	return count, nil
}

func (c *Checkpoint) readVector(r io.Reader, sum hash.Hash) (Vector, error) {
	n := c.state.Dim
	if c.state.Complex {
		n *= 2
	}
	flat := make([]float64, n)
	buffer := make([]byte, 1<<16)
	for at := 0; at < n; {
		part := buffer[:8*min(len(buffer)/8, n-at)]
		if _, err := io.ReadFull(r, part); err != nil {
			return Vector{}, err
		}
		sum.Write(part)
		for ; len(part) > 0; part = part[8:] {
			flat[at] = math.Float64frombits(binary.LittleEndian.Uint64(part))
			at++
		}
	}
	if !c.state.Complex {
		return Vector{Real: flat}, nil
	}
	z := make([]complex128, c.state.Dim)
	for i := range z {
		z[i] = complex(flat[2*i], flat[2*i+1])
	}
	return Vector{Complex: z}, nil
}
