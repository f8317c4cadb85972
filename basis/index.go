package basis

import (
	"math"
	"math/bits"
	"slices"

	"ketloom/basis/pages"
)

// index finds the place of a word in the list. Where listed words are not too
// rare among their candidates it is a set of bits over the numbers of these, in
// blocks of four words that begin with the number of listed ones before them:
// 1⅓ bits a candidate. Otherwise the list itself is searched.
type index struct {
	blocks []indexBlock
}

// blockBits is the number of candidates of a block.
const blockBits = 3 * 64

// indexBlock holds the bits of a block behind its head: the number of listed
// words before the block from bit 24 on, and that before each of its words
// within the block, in one byte for each word.
type indexBlock [4]uint64

// rarest is the largest number of candidates a listed word for which the set of
// bits is used: it then costs about as much as the list.
const rarest = 64

// newIndex makes the index of an ascending list of words.
func newIndex(list []uint64, candidates uint64, number func(w uint64) (uint64, bool)) index {
	if len(list) == 0 || candidates/uint64(len(list)) > rarest || len(list) > math.MaxInt32 {
		return index{}
	}
	x := index{blocks: make([]indexBlock, candidates/blockBits+1)}
	pages.Advise(x.blocks)
	for _, w := range list {
		n, _ := number(w)
		x.blocks[n/blockBits][1+n%blockBits/64] |= 1 << (n % 64)
	}
	var sum uint64
	for i := range x.blocks {
		k := &x.blocks[i]
		first := uint64(bits.OnesCount64(k[1]))
		second := first + uint64(bits.OnesCount64(k[2]))
		k[0] = sum<<24 | second<<16 | first<<8
		sum += second + uint64(bits.OnesCount64(k[3]))
	}
	return x
}

// find returns the place of w, whose number is given.
func (x *index) find(list []uint64, w, number uint64) (int, bool) {
	if x.blocks == nil {
		i, ok := slices.BinarySearch(list, w)
		return i, ok
	}
	return x.place(number)
}

// place returns the place of the word of a number in the set of bits.
func (x *index) place(number uint64) (int, bool) {
	k := &x.blocks[number/blockBits]
	at := number % blockBits / 64
	word, bit := k[at+1], uint64(1)<<(number%64)
	return int(k[0]>>24+k[0]>>(8*at)&0xff) + bits.OnesCount64(word&(bit-1)), word&bit != 0
}

func (x *index) memory() int64 { return int64(len(x.blocks)) * 32 }
