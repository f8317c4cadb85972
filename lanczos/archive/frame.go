package archive

import (
	"encoding/binary"
	"errors"
	"fmt"
	"hash/crc32"
	"io"
)

// The parts of the format; see the package comment.
const (
	skippable    = 0x184D2A50
	zstdMagic    = 0xFD2FB528
	headMagic    = "KETLOOM\r\n\x1a\n\x00"
	trailerMagic = "KETLEND\n"
	version      = 1

	frameHead      = 8
	headFixed      = len(headMagic) + 4 // magic, version, flags
	descriptorSize = frameHead + 36
	trailerSize    = frameHead + 48
	indexEntry     = 24

	// chunkValues is the number of float64 values in a full chunk.
	chunkValues = 131072
)

// Limits of what is read, compared before anything is allocated.
const (
	mostHead     = 1 << 20
	mostMetadata = 64 << 20
	mostIndex    = 256 << 20
	mostVectors  = 1 << 20
	mostValues   = 1 << 40
	// mostFrame is the largest zstd frame of a chunk: incompressible values and
	// what a frame adds.
	mostFrame = chunkValues*8 + 1024
)

// ErrDamaged is wrapped by the errors for files that are cut off, changed, or no
// archives at all. An error of the disk does not wrap it.
var ErrDamaged = errors.New("not an intact archive")

var castagnoli = crc32.MakeTable(crc32.Castagnoli)

func sum(data []byte) uint32 { return crc32.Checksum(data, castagnoli) }

// sealed appends the CRC of the payload and wraps it into a skippable frame.
func sealed(payload []byte) []byte {
	frame := make([]byte, 0, frameHead+len(payload)+4)
	frame = binary.LittleEndian.AppendUint32(frame, skippable)
	frame = binary.LittleEndian.AppendUint32(frame, uint32(len(payload)+4))
	frame = append(frame, payload...)
	return binary.LittleEndian.AppendUint32(frame, sum(payload))
}

// readSealed reads the skippable frame of size bytes at an offset and returns
// its payload without the CRC, which it checks. Sizes that the source does not
// have are refused before the frame is allocated: the caller has compared size
// with the file.
func readSealed(r io.ReaderAt, offset, size, most int64) ([]byte, error) {
	if size < frameHead+4 || size > most {
		return nil, fmt.Errorf("%w: a part of %d bytes at %d, where %d to %d are possible", ErrDamaged, size, offset, frameHead+4, most)
	}
	frame := make([]byte, size)
	if err := readFull(r, frame, offset); err != nil {
		return nil, err
	}
	if binary.LittleEndian.Uint32(frame) != skippable || int64(binary.LittleEndian.Uint32(frame[4:])) != size-frameHead {
		return nil, fmt.Errorf("%w: no frame of %d bytes stands at %d", ErrDamaged, size, offset)
	}
	payload, crc := frame[frameHead:size-4], binary.LittleEndian.Uint32(frame[size-4:])
	if sum(payload) != crc {
		return nil, fmt.Errorf("%w: the checksum of the part at %d does not agree", ErrDamaged, offset)
	}
	return payload, nil
}

// readFull fills data from an offset. Only the end of the file counts as damage;
// other errors are those of the source.
func readFull(r io.ReaderAt, data []byte, offset int64) error {
	n, err := r.ReadAt(data, offset)
	switch {
	case n == len(data):
		return nil
	case err == nil || errors.Is(err, io.EOF):
		return fmt.Errorf("%w: it ends at %d, where %d bytes more were expected", ErrDamaged, offset+int64(n), len(data)-n)
	}
	return fmt.Errorf("reading %d bytes at %d: %w", len(data), offset, err)
}

// checkFrame accepts exactly one zstd frame that is a single segment with a
// content size of the given number of bytes and a checksum, and nothing behind
// it. Layout: RFC 8878, section 3.1.1.
func checkFrame(frame []byte, content int) error {
	if len(frame) < 6 || binary.LittleEndian.Uint32(frame) != zstdMagic {
		return fmt.Errorf("%w: no zstd frame", ErrDamaged)
	}
	const singleSegment, reserved, checksum, dictionary = 0x20, 0x18, 0x04, 0x03
	flags := frame[4]
	if flags&singleSegment == 0 || flags&(reserved|dictionary) != 0 || flags&checksum == 0 {
		return fmt.Errorf("%w: a zstd frame of another kind (descriptor %#x)", ErrDamaged, flags)
	}
	width := 1 << (flags >> 6)
	at := 5 + width
	if at > len(frame) {
		return fmt.Errorf("%w: a zstd frame is cut off", ErrDamaged)
	}
	var field [8]byte
	copy(field[:], frame[5:at])
	size := binary.LittleEndian.Uint64(field[:])
	if width == 2 {
		size += 256
	}
	if size != uint64(content) {
		return fmt.Errorf("%w: a zstd frame says %d bytes, the index %d", ErrDamaged, size, content)
	}
	if end := endOfBlocks(frame, at); end+4 != len(frame) {
		return fmt.Errorf("%w: a zstd frame does not end where the index says", ErrDamaged)
	}
	return nil
}

// endOfBlocks returns where the blocks from at on end, -1 where they do not end
// within the frame.
func endOfBlocks(frame []byte, at int) int {
	const runLength = 1
	for at+3 <= len(frame) {
		block := int(frame[at]) | int(frame[at+1])<<8 | int(frame[at+2])<<16
		size := block >> 3
		if block>>1&3 == runLength {
			size = 1
		}
		at += 3 + size
		if block&1 == 1 {
			return at
		}
	}
	return -1
}
