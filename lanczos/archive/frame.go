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
	headMagic    = "KETLOOM\r\n\x1a\n\x00"
	trailerMagic = "KETLEND\n"
	version      = 1

	frameHead    = 8
	chunkPayload = 36
	trailerSize  = 40
	indexEntry   = 24

	// chunkValues is the number of float64 values in a full chunk.
	chunkValues = 131072
)

// Limits of what is read, before anything is allocated.
const (
	mostMetadata = 64 << 20
	mostIndex    = 256 << 20
	mostVectors  = 1 << 20
	mostValues   = 1 << 40
	// mostFrame is the largest zstd frame of a chunk: incompressible values and
	// what a frame adds.
	mostFrame = chunkValues*8 + 1024
)

// ErrDamaged is wrapped by the errors for files that are cut off, changed, or no
// archives at all.
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

// readSealed reads a skippable frame at an offset and returns its payload
// without the CRC, which it checks.
func readSealed(r io.ReaderAt, offset, size, most int64) ([]byte, error) {
	if size < frameHead+4 || size > most {
		return nil, fmt.Errorf("%w: a part of %d bytes, where %d to %d are possible", ErrDamaged, size, frameHead+4, most)
	}
	frame := make([]byte, size)
	if _, err := r.ReadAt(frame, offset); err != nil {
		return nil, fmt.Errorf("%w: reading %d bytes at %d: %w", ErrDamaged, size, offset, err)
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
