package entangle

import (
	"math/bits"
	"slices"
)

// table maps configurations to numbers: open addressing, at most half full, 33 to
// 66 bytes a key.
type table struct {
	slots []slot
	full  []uint64 // a bit a slot
	count int
	shift int
}

type slot struct{ key, value uint64 }

func newTable() *table { return &table{slots: make([]slot, 64), full: make([]uint64, 1), shift: 58} }

func (t *table) isFull(i int) bool { return t.full[i>>6]>>(i&63)&1 == 1 }

func (t *table) fill(i int, s slot) {
	t.slots[i] = s
	t.full[i>>6] |= 1 << (i & 63)
}

// place returns the slot that holds the key, or the empty one where it belongs.
func (t *table) place(key uint64) int {
	mask := len(t.slots) - 1
	i := int(key * 0x9e3779b97f4a7c15 >> t.shift) // Fibonacci hashing
	for t.isFull(i) && t.slots[i].key != key {
		i = (i + 1) & mask
	}
	return i
}

// add enters a key with a value, unless it is there.
func (t *table) add(key, value uint64) {
	i := t.place(key)
	if t.isFull(i) {
		return
	}
	t.fill(i, slot{key, value})
	if t.count++; 2*t.count > len(t.slots) {
		t.grow()
	}
}

func (t *table) grow() {
	old := *t
	t.slots = make([]slot, 2*len(old.slots))
	t.full = make([]uint64, 2*len(old.full))
	t.shift = 64 - bits.TrailingZeros(uint(len(t.slots)))
	for i, s := range old.slots {
		if old.isFull(i) {
			t.fill(t.place(s.key), s)
		}
	}
}

// get returns the value of a key that was added.
func (t *table) get(key uint64) uint64 { return t.slots[t.place(key)].value }

// set changes the value of a key that was added.
func (t *table) set(key, value uint64) { t.slots[t.place(key)].value = value }

// merge adds all keys of u.
func (t *table) merge(u *table) {
	for i, s := range u.slots {
		if u.isFull(i) {
			t.add(s.key, s.value)
		}
	}
}

// keys returns the keys, ascending.
func (t *table) keys() []uint64 {
	list := make([]uint64, 0, t.count)
	for i, s := range t.slots {
		if t.isFull(i) {
			list = append(list, s.key)
		}
	}
	slices.Sort(list)
	return list
}
