// Package archive keeps eigenvectors in files that say themselves what they
// hold: basis, operator, energies with residuals and bounds, the evidence of the
// solver, and the vectors, compressed without loss in blocks that can be read one
// by one.
//
//	w, err := archive.Create("ground.ket")
//	err = w.Add(archive.Sector{Basis: b, Operator: h, Result: levels})
//	err = w.Close()                           // only now the file stands at its place
//	f, err := archive.Open("ground.ket")      // a year later; f.Close() is required
//	sector, err := f.Sector(0)                // sector.Basis, sector.Operator, sector.Vector
//
// A file holds any number of sectors, each a basis with an operator and some of
// its eigenpairs. It is written beside its place under a temporary name and
// renamed by [Writer.Close], so that an old file of that name is kept until the
// new one is whole.
//
// # Format, version 1
//
// Everything is little-endian. A file is a row of legal zstd frames: skippable
// ones for structure (magic 0x184D2A50, length u32, payload), ordinary ones for
// the data of vectors, each with its content size and checksum. CRC is CRC-32C
// (Castagnoli) of all payload bytes before it.
//
//	HEAD     skippable frame, first in the file
//	         offset size
//	         0      12   magic: "KETLOOM" 0D 0A 1A 0A 00
//	         12     2    version, 1
//	         14     2    flags that a reader must understand; none are defined
//	         16     n    JSON: program, go, created (UTC)
//	         16+n   4    CRC
//
//	CHUNK    skippable frame of 36 bytes, then one zstd frame
//	         0      4    vector, counted over the file
//	         4      4    chunk of the vector
//	         8      4    number of float64 values, at most 131072
//	         12     4    coding: 0 = little-endian float64 without loss
//	         16     8    length of the zstd frame in bytes
//	         24     4    CRC of the zstd frame
//	         28     4    zero
//	         32     4    CRC
//
//	INDEX    skippable frame after the last chunk
//	         0      4    length m of the JSON
//	         4      m    JSON: notes, sectors with their vectors (see below)
//	         4+m    4    number of chunks
//	         …      24   for each chunk: offset u64 of its zstd frame, length u64,
//	                     values u32, CRC of the frame u32
//	         …      4    CRC
//
//	TRAILER  skippable frame of 40 bytes, last in the file
//	         0      8    "KETLEND" 0A
//	         8      8    offset of the INDEX frame
//	         16     8    length of the INDEX frame, its 8 bytes of head included
//	         24     8    length of the file
//	         32     4    zero
//	         36     4    CRC
//
// A real vector is its amplitudes in the order of the basis, a complex one real
// and imaginary part in turn; chunk by chunk of 131,072 values, the last one
// shorter. The JSON of the index has, for each sector: basis (see basis.Basis
// MarshalJSON), fingerprint, dimension, group order, operator (see
// operator.Operator MarshalJSON) and its SHA-256, solver (what
// lanczos.Result writes), conventions in words, notes, and vectors: energy,
// residual, bound, norm, complex, values, first chunk, chunks, and the SHA-256 of
// the values as little-endian float64.
//
// # Refusals
//
// [Open] reads head, trailer and index and checks their CRCs; [Stored.Vector]
// checks CRC and content size of each chunk and the SHA-256 of the whole.
// [File.Verify] accounts for every byte of the file. Sizes are
// compared with the size of the file and with limits before anything is
// allocated: metadata 64 MiB, index 256 MiB, 2^20 vectors, 2^40 values.
//
// # Caveats
//
// Values are kept without loss, which saves little; rounding to a promised error,
// appending to a file, joining files and saving what is left of a damaged one are
// not part of version 1. Eigenvectors of a multiplet are an arbitrary basis of it.
//
// # Arrows
//
// This package may import lanczos, basis and operator.
package archive
