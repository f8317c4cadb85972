package entangle

import (
	"slices"
)

// layout says where in which block an amplitude stands.
type layout struct {
	labels  labels
	blocks  []extent
	rows    *table   // part -> block and row
	columns []*table // rest -> column in its block, by state
	real    bool
}

// extent is a block before it is solved.
type extent struct {
	charges       []int
	rows, columns int
}

// A row is found by the number of its block and its number there.
const rowBits = 32

func packed(block, row int) uint64 { return uint64(block)<<rowBits | uint64(row) }

func unpacked(v uint64) (block, row int) { return int(v >> rowBits), int(v & (1<<rowBits - 1)) }

// arrange sorts rows and columns into blocks. Rows of a block ascend, columns
// ascend by state, then by configuration. A column has elements in one block
// alone, since the charges of part and rest add up to those of the state.
func (k *cut) arrange(v *survey) *layout {
	l := &layout{rows: v.rows, columns: v.columns, real: true}
	for _, s := range k.states {
		l.real = l.real && s.realValued
	}
	rows := v.rows.keys()
	l.labels = k.labelsFor(v, rows)
	byCharges := map[string]int{}
	of := make([]int, len(rows)) // block of a row, in order of appearance
	for i, a := range rows {
		q := l.labels.of(a)
		key := keyOf(q)
		block, ok := byCharges[key]
		if !ok {
			block = len(l.blocks)
			byCharges[key] = block
			l.blocks = append(l.blocks, extent{charges: q})
		}
		of[i] = block
	}
	place := l.sortBlocks()
	for i, a := range rows {
		b := place[of[i]]
		v.rows.set(a, packed(b, l.blocks[b].rows))
		l.blocks[b].rows++
	}
	for _, columns := range v.columns {
		for _, key := range columns.keys() {
			b, _ := unpacked(v.rows.get(columns.get(key)))
			columns.set(key, uint64(l.blocks[b].columns))
			l.blocks[b].columns++
		}
	}
	return l
}

// sortBlocks sorts the blocks by charges and returns where each went.
func (l *layout) sortBlocks() []int {
	order := make([]int, len(l.blocks))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(i, j int) int { return slices.Compare(l.blocks[i].charges, l.blocks[j].charges) })
	sorted := make([]extent, len(l.blocks))
	place := make([]int, len(l.blocks))
	for i, j := range order {
		sorted[i], place[j] = l.blocks[j], i
	}
	l.blocks = sorted
	return place
}

// labelsFor returns the labels of all charges that are fixed, and of those of
// cut.maybe that are conserved and divide the blocks further.
func (k *cut) labelsFor(v *survey, rows []uint64) labels {
	charges := slices.Clone(k.fixed)
	for i, q := range k.maybe {
		if v.conserved[i] {
			charges = append(charges, q)
		}
	}
	l := newLabels(k.space, charges, k.sites)
	for i := len(charges) - 1; i >= len(k.fixed); i-- {
		if less := l.without(i); !divides(l, less, rows) {
			l = less
		}
	}
	return l
}

// divides reports whether rows that are together under less are apart under l.
func divides(l, less labels, rows []uint64) bool {
	finer := map[string]string{}
	for _, a := range rows {
		key, fine := keyOf(less.of(a)), keyOf(l.of(a))
		if known, ok := finer[key]; ok && known != fine {
			return true
		}
		finer[key] = fine
	}
	return false
}

// keyOf makes a key of a map out of charges.
func keyOf(charges []int) string {
	key := make([]byte, 0, 8*len(charges))
	for _, q := range charges {
		for shift := 0; shift < 64; shift += 8 {
			key = append(key, byte(uint64(q)>>shift))
		}
	}
	return string(key)
}
