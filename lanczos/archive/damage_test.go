package archive

import (
	"bytes"
	"encoding/binary"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"github.com/klauspost/compress/zstd"

	"ketloom/basis"
	"ketloom/lanczos"
)

// Every single changed bit of head, descriptors, data, table of the index and
// trailer is noticed, and one bit of each byte of the descriptions in JSON.
func TestEveryBit(t *testing.T) {
	data := small(t)
	if err := readAll(data); err != nil {
		t.Fatal(err)
	}
	begin := bytes.Index(data, []byte(`{"notes"`))
	end := begin + len(taken(t, data).text)
	for i := range 8 * len(data) {
		if at := i / 8; at >= begin && at < end && i%8 != at%8 {
			continue
		}
		data[i/8] ^= 1 << (i % 8)
		if readAll(data) == nil {
			t.Errorf("bit %d of byte %d of %d can change", i%8, i/8, len(data))
		}
		data[i/8] ^= 1 << (i % 8)
	}
}

func TestEveryTruncation(t *testing.T) {
	data := small(t)
	for n := range data {
		if readAll(data[:n]) == nil {
			t.Errorf("the first %d of %d bytes pass", n, len(data))
		}
		if readAll(data[n+1:]) == nil {
			t.Errorf("the last %d of %d bytes pass", len(data)-n-1, len(data))
		}
	}
}

// Bytes behind, before or in the middle of a file are noticed.
func TestAdditions(t *testing.T) {
	data := small(t)
	r := rand.New(rand.NewPCG(41, 42))
	garbage := make([]byte, 70000)
	for i := range garbage {
		garbage[i] = byte(r.Uint32())
	}
	for _, more := range [][]byte{{0}, {'\n'}, garbage, sealed([]byte("more")), data, data[len(data)-trailerSize:]} {
		for _, changed := range [][]byte{append(bytes.Clone(data), more...), append(bytes.Clone(more), data...)} {
			if err := readAll(changed); !errors.Is(err, ErrDamaged) {
				t.Errorf("%d bytes more pass: %v", len(more), err)
			}
		}
	}
}

func TestForeign(t *testing.T) {
	folder := t.TempDir()
	cases := map[string][]byte{
		"empty": nil,
		"text":  []byte(strings.Repeat("this is a text\n", 100)),
		"zeros": make([]byte, 10000),
		"zstd":  sealed([]byte("a skippable frame of somebody else")),
		"lines": bytes.ReplaceAll(small(t), []byte("\r\n"), []byte("\n")),
	}
	for name, data := range cases {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, data, 0o666); err != nil {
			t.Fatal(err)
		}
		if _, err := Open(path); !errors.Is(err, ErrDamaged) || !strings.Contains(err.Error(), path) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if _, err := Open(folder); err == nil {
		t.Error("a folder was opened")
	}
	if _, err := Open(filepath.Join(folder, "none")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a file that does not exist: %v", err)
	}
}

// parts of a file, to be changed and put together again with right checksums.
type parts struct {
	version, flags uint16
	head           string
	frames         []byte // descriptors and data
	text           string
	chunks         []byte // table of the index
	count          uint32
	trailer        func(payload []byte)
}

func taken(t testing.TB, data []byte) parts {
	t.Helper()
	headEnd := frameHead + binary.LittleEndian.Uint32(data[4:])
	trailer := data[len(data)-trailerSize+frameHead:]
	offset := binary.LittleEndian.Uint64(trailer[8:])
	index := data[offset+frameHead : len(data)-trailerSize-4]
	n := binary.LittleEndian.Uint32(index)
	return parts{
		version: version,
		head:    string(data[frameHead+headFixed : headEnd-4]),
		frames:  bytes.Clone(data[headEnd:offset]),
		text:    string(index[4 : 4+n]),
		count:   binary.LittleEndian.Uint32(index[4+n:]),
		chunks:  bytes.Clone(index[8+n:]),
		trailer: func([]byte) {},
	}
}

func (p parts) bytes() []byte {
	payload := binary.LittleEndian.AppendUint16([]byte(headMagic), p.version)
	payload = binary.LittleEndian.AppendUint16(payload, p.flags)
	data := append(sealed(append(payload, p.head...)), p.frames...)
	index := binary.LittleEndian.AppendUint32(nil, uint32(len(p.text)))
	index = append(index, p.text...)
	index = binary.LittleEndian.AppendUint32(index, p.count)
	index = sealed(append(index, p.chunks...))
	trailer := encodeTrailer(int64(len(data)), int64(len(index)))
	payload = trailer[frameHead : len(trailer)-4]
	p.trailer(payload)
	return append(append(data, index...), sealed(payload)...)
}

// Files whose checksums are right and whose contents are not.
func TestWellSealedNonsense(t *testing.T) {
	intact := taken(t, small(t))
	if err := readAll(intact.bytes()); err != nil {
		t.Fatal(err)
	}
	replace := func(old, new string) func(*parts) {
		return func(p *parts) {
			text := strings.Replace(p.text, old, new, 1)
			if text == p.text {
				t.Errorf("%q is not in the descriptions", old)
			}
			p.text = text
		}
	}
	entry := func(at int, value uint32) func(*parts) {
		return func(p *parts) { binary.LittleEndian.PutUint32(p.chunks[at:], value) }
	}
	end := func(at int, value uint64) func(*parts) {
		return func(p *parts) {
			p.trailer = func(payload []byte) { binary.LittleEndian.PutUint64(payload[at:], value) }
		}
	}
	cases := map[string]func(*parts){
		"version 0":           func(p *parts) { p.version = 0 },
		"version 2":           func(p *parts) { p.version = 2 },
		"flag":                func(p *parts) { p.flags = 0x8000 },
		"head no JSON":        func(p *parts) { p.head = "{" },
		"dimension":           replace(`"dimension":14,"group`, `"dimension":15,"group`),
		"dimension 2^55":      replace(`"dimension":14,"group`, `"dimension":36028797018963968,"group`),
		"dimension 2^62":      replace(`"dimension":14,"group`, `"dimension":4611686018427387904,"group`),
		"dimension -1":        replace(`"dimension":14,"group`, `"dimension":-1,"group`),
		"values":              replace(`"values":14`, `"values":13`),
		"values 2^60":         replace(`"values":14`, `"values":1152921504606846976`),
		"real":                replace(`"complex":true`, `"complex":false`),
		"first chunk":         replace(`"first_chunk":1`, `"first_chunk":0`),
		"chunks":              replace(`"chunks":1`, `"chunks":2`),
		"many chunks":         replace(`"chunks":1`, `"chunks":1000000000`),
		"energy":              replace(`"energy":`, `"energy":1`),
		"basis":               replace(`"kind"`, `"Kind"`),
		"fingerprint":         replace(`"fingerprint":"`, `"fingerprint":"0`),
		"operator":            replace(`"terms":[{"coefficient":[`, `"terms":[{"coefficient":[1`),
		"operator unknown":    replace(`"operator_sha256":"`, `"operator_sha256":"0`),
		"digest":              replace(`,"sha256":"`, `,"sha256":"0`),
		"norm":                replace(`"norm":`, `"norm":-`),
		"infinite":            replace(`"bound":`, `"bound":1e999`),
		"solver":              replace(`"solver":{`, `"solver":[{`),
		"solver null":         replace(`"solver":{"Levels"`, `"solver":null,"unknown":{"Levels"`),
		"no levels":           replace(`"solver":{"Levels"`, `"solver":{"levels_of":`),
		"no JSON":             func(p *parts) { p.text = p.text[:len(p.text)-1] },
		"no sectors":          func(p *parts) { p.text = "{}" },
		"short sectors":       func(p *parts) { p.text = `{"sectors":[{},{}]}` },
		"one chunk less":      func(p *parts) { p.count--; p.chunks = p.chunks[:len(p.chunks)-indexEntry] },
		"count":               func(p *parts) { p.count = math.MaxUint32 },
		"offset":              entry(0, 1),
		"offset high":         entry(4, 1),
		"length":              entry(8, 1),
		"length huge":         entry(8, math.MaxUint32),
		"values of chunk":     entry(12, 13),
		"no values":           entry(12, 0),
		"values huge":         entry(12, 1<<31),
		"coding unknown":      entry(16, 2),
		"coding other":        entry(16, 1^binary.LittleEndian.Uint32(intact.chunks[16:])),
		"crc":                 entry(20, 0),
		"index offset":        end(8, 0),
		"index offset huge":   end(8, math.MaxUint64),
		"index length":        end(16, 20),
		"index length huge":   end(16, math.MaxUint64),
		"end":                 end(24, 1),
		"earlier end":         end(32, 8),
		"gap":                 func(p *parts) { p.frames = append(p.frames, sealed([]byte("hidden"))...) },
		"descriptor vector":   func(p *parts) { reseal(p.frames, 0, 1) },
		"descriptor chunk":    func(p *parts) { reseal(p.frames, 4, 1) },
		"descriptor values":   func(p *parts) { reseal(p.frames, 8, 13) },
		"descriptor coding":   func(p *parts) { reseal(p.frames, 12, 7) },
		"descriptor reserved": func(p *parts) { reseal(p.frames, 28, 1) },
	}
	for name, change := range cases {
		p := intact
		p.frames, p.chunks = bytes.Clone(p.frames), bytes.Clone(p.chunks)
		change(&p)
		if err := readAll(p.bytes()); err == nil {
			t.Errorf("%s: accepted", name)
		}
	}
}

// reseal changes a word of the first descriptor and corrects its checksum.
func reseal(frames []byte, at int, value uint32) {
	payload := frames[frameHead : descriptorSize-4]
	binary.LittleEndian.PutUint32(payload[at:], value)
	binary.LittleEndian.PutUint32(frames[descriptorSize-4:], sum(payload))
}

// withFrame replaces the data of a file with one chunk by another frame, with
// right checksums.
func withFrame(t testing.TB, data, frame []byte, values uint32, coding uint32, text func(string) string) []byte {
	t.Helper()
	p := taken(t, data)
	begin := int64(frameHead + headFixed + len(p.head) + 4)
	k := chunkEntry{offset: begin + descriptorSize, length: uint32(len(frame)), values: values, coding: coding, crc: sum(frame)}
	p.frames = append(k.descriptor(0, 0), frame...)
	p.chunks, p.count = nil, 1
	p.chunks = binary.LittleEndian.AppendUint64(p.chunks, uint64(k.offset))
	for _, u := range []uint32{k.length, k.values, k.coding, k.crc} {
		p.chunks = binary.LittleEndian.AppendUint32(p.chunks, u)
	}
	if text != nil {
		p.text = text(p.text)
	}
	return p.bytes()
}

func oneVector(t testing.TB) []byte {
	t.Helper()
	b := product(t, 5)
	data, err := os.ReadFile(write(t, Sector{Basis: b, Operator: heisenberg(b.Space()), Result: invented(b, 1, false, rand.New(rand.NewPCG(43, 44)))}))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// Numbers that are not finite are refused on reading, also where every checksum
// agrees.
func TestNotFiniteOnRead(t *testing.T) {
	data := oneVector(t)
	encoder, err := newEncoder()
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), 5} {
		words := make([]byte, 8*32)
		binary.LittleEndian.PutUint64(words[8*17:], math.Float64bits(bad))
		digest := func(text string) string {
			at := strings.Index(text, `"complex":false`)
			at += strings.Index(text[at:], `"sha256":"`) + len(`"sha256":"`)
			return text[:at] + digestOf(words) + text[at+64:]
		}
		changed := withFrame(t, data, encoder.EncodeAll(words, nil), 32, codingWords, digest)
		f, err := Read(bytes.NewReader(changed), int64(len(changed)))
		if err != nil {
			t.Fatal(err)
		}
		s, _ := f.Sector(0)
		for name, err := range map[string]error{"Verify": f.Verify(t.Context()), "Vector": second(s.Vector(0)), "Part": second(s.Part(0, 10, 10))} {
			if (err == nil) != (bad == 5) {
				t.Errorf("%v, %s: %v", bad, name, err)
			}
		}
		f.Close()
	}
}

func second(_ lanczos.Vector, err error) error { return err }

// allocated returns the bytes that a call allocates, the smallest of three.
func allocated(call func()) uint64 {
	least := uint64(math.MaxUint64)
	for range 3 {
		var before, after runtime.MemStats
		runtime.ReadMemStats(&before)
		call()
		runtime.ReadMemStats(&after)
		least = min(least, after.TotalAlloc-before.TotalAlloc)
	}
	return least
}

// Frames that say little and hold a GiB, or say what they hold: refused without
// the memory for it.
func TestBomb(t *testing.T) {
	data := oneVector(t)
	var long, short bytes.Buffer
	for _, b := range []struct {
		out *bytes.Buffer
		lie bool
	}{{&long, false}, {&short, true}} {
		e, err := zstd.NewWriter(b.out, zstd.WithEncoderCRC(true), zstd.WithSingleSegment(false), zstd.WithEncoderConcurrency(1))
		if err != nil {
			t.Fatal(err)
		}
		if _, err := io.CopyN(e, zeros{}, 1<<30); err != nil {
			t.Fatal(err)
		}
		if err := e.Close(); err != nil {
			t.Fatal(err)
		}
	}
	// The lie: a single segment of 256 bytes, followed by the blocks of a GiB.
	blocks := short.Bytes()[6:]
	lie := binary.LittleEndian.AppendUint32(nil, zstdMagic)
	lie = append(append(lie, 0x20|0x04|1<<6, 0, 0), blocks...)
	for name, frame := range map[string][]byte{"honest": long.Bytes(), "lying": lie} {
		changed := withFrame(t, data, frame, 32, codingWords, nil)
		bytesUsed := allocated(func() {
			err := readAll(changed)
			if !errors.Is(err, ErrDamaged) {
				t.Errorf("%s: %v", name, err)
			}
		})
		if bytesUsed > 8<<20 {
			t.Errorf("%s: %d bytes were allocated for a frame of %d", name, bytesUsed, len(frame))
		}
	}
}

type zeros struct{}

func (zeros) Read(p []byte) (int, error) { clear(p); return len(p), nil }

// Declared sizes are compared with the file before anything is allocated.
func TestHugeDeclarations(t *testing.T) {
	data := oneVector(t)
	u32 := func(at int, value uint32) []byte {
		changed := bytes.Clone(data)
		binary.LittleEndian.PutUint32(changed[at:], value)
		return changed
	}
	end := func(change func(payload []byte)) []byte {
		p := taken(t, data)
		p.trailer = change
		return p.bytes()
	}
	index := func(change func(p *parts)) []byte {
		p := taken(t, data)
		change(&p)
		return p.bytes()
	}
	offset := int(binary.LittleEndian.Uint64(data[len(data)-trailerSize+frameHead+8:]))
	cases := map[string][]byte{
		"head of 4 GiB":  u32(4, math.MaxUint32),
		"index of 4 GiB": u32(offset+4, math.MaxUint32),
		"index of 200 MiB in the trailer": end(func(p []byte) {
			binary.LittleEndian.PutUint64(p[8:], 200)
			binary.LittleEndian.PutUint64(p[16:], 200<<20)
		}),
		"descriptions of 4 GiB": index(func(p *parts) { p.text = "" }),
		"2^32-1 chunks":         index(func(p *parts) { p.count = math.MaxUint32 }),
		"chunk of 4 GiB":        index(func(p *parts) { binary.LittleEndian.PutUint32(p.chunks[8:], math.MaxUint32) }),
		"2^31 values": index(func(p *parts) {
			binary.LittleEndian.PutUint32(p.chunks[12:], 1<<31)
			p.text = strings.ReplaceAll(strings.ReplaceAll(p.text, `"values":32`, `"values":2147483648`), `"dimension":32`, `"dimension":2147483648`)
		}),
	}
	for name, changed := range cases {
		bytesUsed := allocated(func() {
			if readAll(changed) == nil {
				t.Errorf("%s: accepted", name)
			}
		})
		if bytesUsed > 1<<20 {
			t.Errorf("%s: %d bytes were allocated for a file of %d", name, bytesUsed, len(changed))
		}
	}
}

// Descriptions of many tiny objects take a small multiple of their own size.
func TestTinyObjects(t *testing.T) {
	const n = 1 << 17
	list := func(item string) string { return "[" + strings.Repeat(item+",", n-1) + item + "]" }
	long := `"` + strings.Repeat("x", leastSector) + `"`
	for name, text := range map[string]string{
		"sectors":   `{"sectors":` + list("{}") + `}`,
		"vectors":   `{"sectors":[{"solver":` + long + `,"vectors":` + list("{}") + `}]}`,
		"operators": `{"operators":` + list("{}") + `}`,
		"levels":    `{"sectors":[{"basis":1,"solver":{"Levels":` + list("{}") + `}}]}`,
	} {
		p := parts{version: version, head: "{}", text: text, trailer: func([]byte) {}}
		data := p.bytes()
		bytesUsed := allocated(func() {
			if readAll(data) == nil {
				t.Errorf("%s: accepted", name)
			}
		})
		if limit := uint64(8 * len(text)); bytesUsed > limit {
			t.Errorf("%s: %d bytes were allocated for descriptions of %d", name, bytesUsed, len(text))
		}
	}
}

// failing is a source that fails from an offset on, and one that is shorter than
// it says.
type failing struct {
	data []byte
	from int64
	err  error
}

func (f failing) ReadAt(p []byte, at int64) (int, error) {
	if at+int64(len(p)) > f.from {
		return 0, f.err
	}
	return bytes.NewReader(f.data).ReadAt(p, at)
}

// An error of the source is not taken for damage; an early end is.
func TestFailingSource(t *testing.T) {
	data := oneVector(t)
	broken := errors.New("the cable is out")
	for from := int64(0); from < int64(len(data)); from += 7 {
		_, err := Read(failing{data, from, broken}, int64(len(data)))
		if !errors.Is(err, broken) || errors.Is(err, ErrDamaged) {
			t.Fatalf("from %d on: %v", from, err)
		}
		_, err = Read(failing{data, from, io.EOF}, int64(len(data)))
		if !errors.Is(err, ErrDamaged) {
			t.Fatalf("from %d on: %v", from, err)
		}
	}
}

// Random changes with corrected checksums end in an error or in a file that can
// be read; nothing panics or hangs.
func TestRandomChanges(t *testing.T) {
	intact := taken(t, small(t))
	r := rand.New(rand.NewPCG(45, 46))
	accepted := 0
	for range 4000 {
		p := intact
		p.frames, p.chunks = bytes.Clone(p.frames), bytes.Clone(p.chunks)
		text := []byte(p.text)
		for range 1 + r.IntN(3) {
			target := [][]byte{text, p.chunks, p.frames}[r.IntN(3)]
			target[r.IntN(len(target))] ^= byte(1 << r.IntN(8))
		}
		p.text = string(text)
		if readAll(p.bytes()) == nil {
			accepted++ // a note, a convention or a witness has changed
		}
	}
	if accepted > 2000 {
		t.Errorf("%d of 4000 changed files are accepted", accepted)
	}
}

// A writer that was given numbers it does not take stays as it was.
func TestRefusedOnWrite(t *testing.T) {
	r := rand.New(rand.NewPCG(47, 48))
	b := product(t, 17)
	h := heisenberg(b.Space())
	good := func() *lanczos.Result { return invented(b, 2, false, r) }
	other := product(t, 5)
	cases := map[string]func(s *Sector){
		"NaN in the second vector":       func(s *Sector) { s.Result.Vectors[1].Real[70000] = math.NaN() },
		"infinity in the last value":     func(s *Sector) { s.Result.Vectors[1].Real[b.Len()-1] = math.Inf(-1) },
		"norm too large":                 func(s *Sector) { s.Result.Vectors[1].Real[3] = 1e200 },
		"energy":                         func(s *Sector) { s.Result.Levels[1].Energy = math.NaN() },
		"residual":                       func(s *Sector) { s.Result.Levels[0].Residual = math.Inf(1) },
		"norm of the operator":           func(s *Sector) { s.Result.Norm = math.Inf(1) },
		"no basis":                       func(s *Sector) { s.Basis = nil },
		"no result":                      func(s *Sector) { s.Result = nil },
		"operator of another space":      func(s *Sector) { s.Operator = heisenberg(other.Space()) },
		"operator with an error":         func(s *Sector) { s.Operator = hopping(b.Space()) },
		"no vectors":                     func(s *Sector) { s.Result.Vectors = nil },
		"no levels":                      func(s *Sector) { s.Result.Vectors, s.Result.Levels = nil, nil },
		"vector of another length":       func(s *Sector) { s.Result.Vectors[1].Real = s.Result.Vectors[1].Real[1:] },
		"vector without values":          func(s *Sector) { s.Result.Vectors[1] = lanczos.Vector{} },
		"vector that is of both scalars": func(s *Sector) { s.Result.Vectors[0].Complex = make([]complex128, b.Len()) },
	}
	path := filepath.Join(t.TempDir(), "a.ket")
	w, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Discard()
	first := good()
	if err := w.Add(Sector{Basis: b, Operator: h, Result: first}); err != nil {
		t.Fatal(err)
	}
	offset := w.offset
	for name, change := range cases {
		s := Sector{Basis: b, Operator: h, Result: good()}
		change(&s)
		if err := w.Add(s); err == nil || !strings.Contains(err.Error(), path) {
			t.Errorf("%s: %v", name, err)
		} else if name == "NaN in the second vector" && !strings.Contains(err.Error(), "vector 1: amplitude 70000 is") {
			t.Errorf("the error does not say which amplitude: %v", err)
		}
		if w.offset != offset {
			t.Errorf("%s: %d bytes are left behind", name, w.offset-offset)
		}
	}
	if err := w.Add(Sector{Basis: b, Result: good()}); err == nil {
		t.Error("no operator: accepted")
	}
	last := good()
	if err := w.Add(Sector{Basis: b, Operator: h, Result: last}); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	f := opened(t, path)
	if err := f.Verify(t.Context()); err != nil || f.Sectors() != 2 {
		t.Fatalf("%d sectors: %v", f.Sectors(), err)
	}
	for i, result := range []*lanczos.Result{first, last} {
		s, _ := f.Sector(i)
		for j := range s.Len() {
			if v, err := s.Vector(j); err != nil || !sameBits(v, result.Vectors[j]) {
				t.Errorf("sector %d, vector %d: %v", i, j, err)
			}
		}
	}
}

// What a caller changes after Add does not change the file.
func TestNothingKept(t *testing.T) {
	b := ring(t, 6, basis.SpinHalf(), 0, nil)
	result := invented(b, 1, false, rand.New(rand.NewPCG(49, 50)))
	energy, reason := result.Levels[0].Energy, result.Reason
	notes := map[string]string{"a": "1"}
	path := filepath.Join(t.TempDir(), "a.ket")
	w, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Discard()
	if err := w.Add(Sector{Basis: b, Operator: heisenberg(b.Space()), Result: result, Notes: notes}); err != nil {
		t.Fatal(err)
	}
	notes["a"] = "2"
	result.Levels[0].Energy, result.Reason = math.NaN(), "changed"
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	s, _ := opened(t, path).Sector(0)
	if s.Note("a") != "1" || s.Level(0).Energy != energy || s.Solver().Reason != reason {
		t.Errorf("%s, %v, %s", s.Note("a"), s.Level(0), s.Solver().Reason)
	}
}

// Every note comes back; bytes that are no UTF-8 become U+FFFD.
func TestNotes(t *testing.T) {
	notes := map[string]string{"": "empty key", "µ": "Σ₁ <&> \u2028 \"\\\n\x00", "bad": "a\xffb", "long": strings.Repeat("ψ", 100000)}
	path := filepath.Join(t.TempDir(), "a.ket")
	w, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Discard()
	for key, value := range notes {
		w.Note(key, value)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	f := opened(t, path)
	for key, value := range notes {
		if want := strings.ToValidUTF8(value, "\uFFFD"); f.Note(key) != want {
			t.Errorf("%q: %q", key, fmt.Sprint(f.Note(key)))
		}
	}
	if !json.Valid([]byte(taken(t, mustRead(t, path)).text)) {
		t.Error("the descriptions are no JSON")
	}
}

func mustRead(t testing.TB, path string) []byte {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return data
}
