package archive

import (
	"encoding/binary"
	"encoding/json"
	"fmt"
)

// chunkEntry is the place of a chunk.
type chunkEntry struct {
	offset int64 // of the zstd frame
	length uint32
	values uint32
	coding uint32
	crc    uint32
}

// descriptor returns the skippable frame before chunk `number` of a vector.
func (e chunkEntry) descriptor(vector, number int) []byte {
	payload := binary.LittleEndian.AppendUint32(nil, uint32(vector))
	payload = binary.LittleEndian.AppendUint32(payload, uint32(number))
	payload = binary.LittleEndian.AppendUint32(payload, e.values)
	payload = binary.LittleEndian.AppendUint32(payload, e.coding)
	payload = binary.LittleEndian.AppendUint64(payload, uint64(e.length))
	payload = binary.LittleEndian.AppendUint32(payload, e.crc)
	payload = binary.LittleEndian.AppendUint32(payload, 0)
	return sealed(payload)
}

// encodeHead returns the HEAD frame.
func encodeHead(h head) ([]byte, error) {
	text, err := json.Marshal(h)
	if err != nil {
		return nil, err
	}
	payload := binary.LittleEndian.AppendUint16([]byte(headMagic), version)
	payload = binary.LittleEndian.AppendUint16(payload, 0)
	return sealed(append(payload, text...)), nil
}

// encodeIndex returns the INDEX frame.
func encodeIndex(c contents, chunks []chunkEntry) ([]byte, error) {
	text, err := json.Marshal(c)
	if err != nil {
		return nil, err
	}
	if len(text) > mostMetadata || len(chunks) > mostChunks {
		return nil, fmt.Errorf("%d bytes of descriptions and %d chunks are more than one file holds (%d and %d); use several files", len(text), len(chunks), mostMetadata, mostChunks)
	}
	payload := make([]byte, 0, 8+len(text)+indexEntry*len(chunks))
	payload = binary.LittleEndian.AppendUint32(payload, uint32(len(text)))
	payload = append(payload, text...)
	payload = binary.LittleEndian.AppendUint32(payload, uint32(len(chunks)))
	for _, k := range chunks {
		payload = binary.LittleEndian.AppendUint64(payload, uint64(k.offset))
		payload = binary.LittleEndian.AppendUint32(payload, k.length)
		payload = binary.LittleEndian.AppendUint32(payload, k.values)
		payload = binary.LittleEndian.AppendUint32(payload, k.coding)
		payload = binary.LittleEndian.AppendUint32(payload, k.crc)
	}
	return sealed(payload), nil
}

// mostChunks is what an index has room for beside the descriptions.
const mostChunks = (mostIndex - mostMetadata - 64) / indexEntry

// encodeTrailer returns the TRAILER frame of a file whose INDEX frame stands at
// an offset.
func encodeTrailer(offset, length int64) []byte {
	payload := []byte(trailerMagic)
	payload = binary.LittleEndian.AppendUint64(payload, uint64(offset))
	payload = binary.LittleEndian.AppendUint64(payload, uint64(length))
	payload = binary.LittleEndian.AppendUint64(payload, uint64(offset+length+trailerSize))
	payload = binary.LittleEndian.AppendUint64(payload, 0)
	payload = binary.LittleEndian.AppendUint32(payload, 0)
	return sealed(payload)
}

// decodeIndex reads the payload of an INDEX frame that stands at offset end,
// behind a head that ends at offset begin.
func decodeIndex(payload []byte, begin, end int64) (contents, []chunkEntry, error) {
	if len(payload) < 8 {
		return contents{}, nil, fmt.Errorf("%w: the index is too short", ErrDamaged)
	}
	n := int64(binary.LittleEndian.Uint32(payload))
	if n > mostMetadata || 8+n > int64(len(payload)) {
		return contents{}, nil, fmt.Errorf("%w: the index says %d bytes of descriptions", ErrDamaged, n)
	}
	chunks, err := decodeChunks(payload[4+n:], begin, end)
	if err != nil {
		return contents{}, nil, err
	}
	c, err := decodeContents(payload[4 : 4+n])
	if err != nil {
		return contents{}, nil, err
	}
	return c, chunks, c.check(chunks)
}

// decodeChunks reads the places of the chunks: descriptor and frame of each
// stand behind those of the one before without a gap, between begin and end.
func decodeChunks(table []byte, begin, end int64) ([]chunkEntry, error) {
	count := int64(binary.LittleEndian.Uint32(table))
	if table = table[4:]; int64(len(table)) != count*indexEntry {
		return nil, fmt.Errorf("%w: the index says %d chunks", ErrDamaged, count)
	}
	chunks := make([]chunkEntry, count)
	at := begin
	for i := range chunks {
		e := table[i*indexEntry:]
		k := chunkEntry{
			length: binary.LittleEndian.Uint32(e[8:]), values: binary.LittleEndian.Uint32(e[12:]),
			coding: binary.LittleEndian.Uint32(e[16:]), crc: binary.LittleEndian.Uint32(e[20:]),
		}
		at += descriptorSize
		if binary.LittleEndian.Uint64(e) != uint64(at) {
			return nil, fmt.Errorf("%w: chunk %d is not behind the one before", ErrDamaged, i)
		}
		k.offset = at
		if k.length > mostFrame || k.values == 0 || k.values > chunkValues || int64(k.length) > end-at {
			return nil, fmt.Errorf("%w: chunk %d of %d bytes at %d lies outside of the file or is too large", ErrDamaged, i, k.length, at)
		}
		if k.coding != codingWords && k.coding != codingPlanes {
			return nil, fmt.Errorf("%w: chunk %d has the unknown coding %d", ErrDamaged, i, k.coding)
		}
		at += int64(k.length)
		chunks[i] = k
	}
	if at != end {
		return nil, fmt.Errorf("%w: %d bytes before the index belong to nothing", ErrDamaged, end-at)
	}
	return chunks, nil
}
