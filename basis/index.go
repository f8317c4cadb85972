package basis

import (
	"math/bits"
	"slices"
)

// index finds the number of a representative. Where representatives are not
// too rare among the configurations of the charges it is a set of bits over
// the ranks of these, with the number of representatives before each word;
// otherwise the list itself is searched.
type index struct {
	bits   []uint64
	before []uint32
}

// rarest is the largest number of candidates a representative for which the
// set of bits is used: it then costs at most as much as the list.
const rarest = 64

func newIndex(list []Configuration, candidates uint64, rank *ranker) index {
	if len(list) == 0 || candidates/uint64(len(list)) > rarest || len(list) > 1<<32-1 {
		return index{}
	}
	x := index{bits: make([]uint64, candidates/64+1), before: make([]uint32, candidates/64+1)}
	for _, c := range list {
		r, _ := rank.rank(c)
		x.bits[r/64] |= 1 << (r % 64)
	}
	var sum uint32
	for w, word := range x.bits {
		x.before[w] = sum
		sum += uint32(bits.OnesCount64(word))
	}
	return x
}

func (x *index) find(list []Configuration, c Configuration, rank uint64) (int, bool) {
	if x.bits == nil {
		i, ok := slices.BinarySearch(list, c)
		return i, ok
	}
	word, bit := x.bits[rank/64], uint64(1)<<(rank%64)
	return int(x.before[rank/64]) + bits.OnesCount64(word&(bit-1)), word&bit != 0
}

func (x *index) memory() int64 { return int64(len(x.bits))*8 + int64(len(x.before))*4 }
