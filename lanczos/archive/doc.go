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
// its eigenpairs, and notes. It is written beside its place under a temporary
// name, brought to the disk and renamed by [Writer.Close], so that an old file of
// that name is kept until the new one is whole.
//
// # Format, version 1
//
// Everything is little-endian. A file is a row of legal zstd frames (RFC 8878):
// skippable ones for structure, ordinary ones for the data of vectors. A
// skippable frame is the bytes 50 2A 4D 18, the length of its payload as u32, and
// the payload, whose last four bytes are always the CRC-32C (Castagnoli,
// polynomial 1EDC6F41 reflected, as in RFC 3720) of the payload before them. The
// offsets below count from the start of the payload; "offset in the file" and
// lengths of frames include the eight bytes before a payload. Nothing stands
// between frames, before the first or behind the last.
//
//	HEAD     skippable frame, first in the file
//	         offset size
//	         0      12   magic: "KETLOOM" 0D 0A 1A 0A 00
//	         12     2    version, 1
//	         14     2    flags that a reader must understand; none are defined
//	         16     n    JSON
//	         16+n   4    CRC
//
//	         then for every chunk of every vector, in order, a DESCRIPTOR and a
//	         DATA frame:
//
//	DESCRIPTOR  skippable frame with 36 bytes of payload
//	         0      4    vector, counted from 0 over the whole file
//	         4      4    chunk, counted from 0 within the vector
//	         8      4    number of values in the chunk, 1 … 131072
//	         12     4    coding
//	         16     8    length of the DATA frame in bytes
//	         24     4    CRC-32C of the DATA frame
//	         28     4    zero
//	         32     4    CRC
//
//	DATA     one zstd frame: single segment, with content size (8 bytes a value)
//	         and checksum, without dictionary
//
//	INDEX    skippable frame behind the last chunk
//	         0      4    length m of the JSON
//	         4      m    JSON
//	         4+m    4    number c of chunks in the file
//	         8+m    24·c for each chunk: offset in the file of its DATA frame u64,
//	                     length of that frame u32, values u32, coding u32,
//	                     CRC-32C of that frame u32
//	         …      4    CRC
//
//	TRAILER  skippable frame with 48 bytes of payload, last in the file
//	         0      8    "KETLEND" 0A
//	         8      8    offset in the file of the INDEX frame
//	         16     8    length of the INDEX frame
//	         24     8    length of the file, this frame included
//	         32     8    zero (length of the file before an addition, where a later
//	                     version allows additions)
//	         40     4    zero
//	         44     4    CRC
//
// The values of a real vector are its amplitudes in the order of the basis, those
// of a complex vector real and imaginary part of each amplitude in turn. They are
// cut into chunks of 131,072 values, the last one shorter. Codings of the n
// values of a chunk, as the content of its DATA frame:
//
//	0   n float64, 8 bytes each
//	1   each float64 as a u64 rotated left by one bit (bit 63, the sign, becomes
//	    bit 0); then n bytes that are bits 0-7 of all values, n bytes that are bits
//	    8-15, … n bytes that are bits 56-63
//
// JSON of HEAD: program, go (version of Go), created (UTC, RFC 3339). JSON of
// INDEX:
//
//	notes        object of strings, absent where there are none
//	operators    list of {sha256, terms}: each different operator once; terms is
//	             what operator.Operator writes, sha256 is of its bytes as they stand
//	sectors      list, for each sector
//	  basis           what basis.Basis writes: sites, sector, dimension
//	  fingerprint     SHA-256 of the bytes of basis as they stand
//	  dimension       number of states D
//	  group_order     number of symmetries, 1 without
//	  states_sha256   SHA-256 of the representatives, each as u64, of the states
//	                  number floor(k·D/n), k = 0 … n-1, with n = min(D, 65536)
//	  operator_sha256 which of the operators
//	  solver          what lanczos.Result writes: Levels, Converged, Complete,
//	                  Check, Tolerance, Products, Seed (up to 2^64-1), …
//	  conventions     list of sentences: sign of momenta, order of modes, formula of
//	                  the symmetrised states, meaning of an amplitude
//	  notes           object of strings, absent where there are none
//	  vectors         list, one for each level of the solver
//	    energy, residual, bound  as lanczos.Level has them
//	    norm          Euclidean norm
//	    phase         the rule that fixes the phase, in words
//	    complex       whether the amplitudes are complex
//	    values        D, or 2·D where complex
//	    first_chunk   number of its first chunk in the table of the index
//	    chunks        number of its chunks
//	    sha256        SHA-256 of all its values as float64, 8 bytes each
//	    witnesses     list of {levels, re, im}: amplitudes ψ(c) of up to eight
//	                  product states, with the level of every site written out
//
// SHA-256 are in lower-case hexadecimal digits. A reader ignores keys it does not
// know; what changes the meaning of a file has a version or a flag. Names of
// hosts, users and folders are not stored.
//
// The public zstd tool tests a whole file (zstd -t) and prints the contents of
// the DATA frames one after the other (zstd -dc). testdata/read.py is a reader
// that was written from this comment.
//
// # Refusals
//
// [Open] reads head, trailer and index, checks their CRCs, that the chunks fill
// the file without a gap and that every chunk belongs to one vector.
// [Stored.Vector] checks CRC and content size of each chunk and the SHA-256 of
// the whole. Descriptors are read by [File.Verify] alone, which accounts for
// every byte of the file. [Stored.Basis] refuses a basis with another dimension,
// fingerprint or numbering, and [Stored.CheckWitnesses] one whose signs or
// momenta mean something else. Numbers that are not finite are neither written
// nor read.
//
// Sizes are compared with the size of the file and with limits before anything is
// allocated: head 1 MiB, descriptions 64 MiB, index 256 MiB, chunk 1 MiB, 2^20
// vectors, 2^40 values, and [DefaultBudget] for what is read of a vector at once.
//
// Checksums find accidents. They do not prove who wrote a file.
//
// # Caveats
//
// Values are kept without loss, which saves about an eighth: the mantissas are
// noise. Vectors stored without their symmetries repeat amplitudes and become two
// to four times shorter, but the same vectors in their symmetry sectors are a
// hundred times shorter. A vector is cut at no other place than its chunks.
// Eigenvectors of a multiplet are an arbitrary basis of its space: keep the whole
// multiplet.
//
// Not part of version 1: rounding amplitudes to a promised error (a coding of
// its own), adding sectors to a finished file, saving the intact chunks of a
// damaged one (descriptors name vector and chunk, but the descriptions stand at
// the end), joining files of several processes, and the list of representatives
// itself, which the basis is asked to make again. A link at the path is replaced
// by the file, not followed.
//
// # Arrows
//
// This package may import lanczos, basis and operator.
package archive
