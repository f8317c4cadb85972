package entangle

import (
	"math/bits"
	"slices"
)

// table maps configurations to numbers: open addressing, at most half full.
type table struct {
	slots []slot
	count int
	shift int
}

type slot struct {
	key, value uint64
	full       bool
}

func newTable() *table { return &table{slots: make([]slot, 64), shift: 58} }

// place returns the slot that holds the key, or the empty one where it belongs.
func (t *table) place(key uint64) int {
	mask := len(t.slots) - 1
	i := int(key * 0x9e3779b97f4a7c15 >> t.shift) // Fibonacci hashing
	for t.slots[i].full && t.slots[i].key != key {
		i = (i + 1) & mask
	}
	return i
}

// add enters a key with a value, unless it is there.
func (t *table) add(key, value uint64) {
	i := t.place(key)
	if t.slots[i].full {
		return
	}
	t.slots[i] = slot{key, value, true}
	if t.count++; 2*t.count > len(t.slots) {
		old := t.slots
		t.slots = make([]slot, 2*len(old))
		t.shift = 64 - bits.TrailingZeros(uint(len(t.slots)))
		for _, s := range old {
			if s.full {
				t.slots[t.place(s.key)] = s
			}
		}
	}
}

// get returns the value of a key that was added.
func (t *table) get(key uint64) uint64 { return t.slots[t.place(key)].value }

// set changes the value of a key that was added.
func (t *table) set(key, value uint64) { t.slots[t.place(key)].value = value }

// merge adds all keys of u.
func (t *table) merge(u *table) {
	for _, s := range u.slots {
		if s.full {
			t.add(s.key, s.value)
		}
	}
}

// keys returns the keys, ascending.
func (t *table) keys() []uint64 {
	list := make([]uint64, 0, t.count)
	for _, s := range t.slots {
		if s.full {
			list = append(list, s.key)
		}
	}
	slices.Sort(list)
	return list
}
