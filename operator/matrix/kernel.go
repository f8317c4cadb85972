package matrix

import (
	"math/bits"

	"ketloom/basis"
	"ketloom/operator"
)

// kernel is a canonical term compiled to masks. On a configuration c with
// c&mask == value it gives the configuration c^flip with the amplitude
//
//	coefficient · (-1)^popcount(c&signs).
type kernel struct {
	mask, value uint64
	flip        uint64
	signs       uint64
	coefficient complex128
}

// exchange is two kernels in one: those with the same mask, flip, signs and
// coefficient whose values are the two parts of the mask. It acts where c&mask is
// neither nothing nor all of the mask, if one of the two values is meant.
type exchange struct {
	kernel
	other uint64 // the second value
	hop   int
}

// bundle is the kernels that ask for the same occupied bits, so that one test
// passes over all of them.
type bundle struct {
	value   uint64
	kernels []kernel
	hops    []int // number of each
}

// paired takes out the kernels that are two halves of an exchange, and bundles the
// others by their occupied bits. Kernels are numbered in the order in which rows try
// them; flips has the flip of each number. Groups keep the order in which they are met
// first.
func paired(list []kernel) (exchanges []exchange, bundles []bundle, flips []basis.Configuration) {
	half := map[kernel]int{} // with the value replaced by the other one
	taken := make([]bool, len(list))
	for i, k := range list {
		twin := k
		twin.value = k.mask &^ k.value
		if at, ok := half[k]; ok && !taken[at] && k.value != twin.value {
			taken[at], taken[i] = true, true
			exchanges = append(exchanges, exchange{kernel: list[at], other: k.value, hop: len(flips)})
			flips = append(flips, basis.Configuration(k.flip))
			continue
		}
		half[twin] = i
	}
	place := map[uint64]int{}
	for i, k := range list {
		if taken[i] {
			continue
		}
		at, known := place[k.value]
		if !known {
			at = len(bundles)
			place[k.value] = at
			bundles = append(bundles, bundle{value: k.value})
		}
		bundles[at].kernels = append(bundles[at].kernels, k)
	}
	for i := range bundles {
		for _, k := range bundles[i].kernels {
			bundles[i].hops = append(bundles[i].hops, len(flips))
			flips = append(flips, basis.Configuration(k.flip))
		}
	}
	return exchanges, bundles, flips
}

// compile translates the canonical form of op; those that leave a configuration
// as it is come apart from the others.
func compile(op operator.Operator) (diagonal, moving []kernel) {
	op = op.NormalOrdered()
	for i := range op.Len() {
		k := compileTerm(op.Space(), op.At(i))
		if k.flip == 0 {
			diagonal = append(diagonal, k)
		} else {
			moving = append(moving, k)
		}
	}
	return diagonal, moving
}

// compileTerm follows the factors from the right: each meets the configuration
// that those before it have made.
func compileTerm(space *basis.Space, t operator.Term) kernel {
	k := kernel{coefficient: t.Coefficient}
	for i := len(t.Factors) - 1; i >= 0; i-- {
		f := t.Factors[i]
		mode := space.Mode(f.Mode)
		field := uint64(1<<mode.Width-1) << mode.Shift
		bit := uint64(1) << mode.Shift
		switch f.Symbol {
		case operator.Number:
			k.mask |= bit
			k.value |= bit
		case operator.SpinZ:
			k.signs ^= bit
			k.coefficient *= -0.5
		case operator.Raise:
			k.mask |= bit
			k.jump(space, mode, bit)
		case operator.Lower:
			k.mask |= bit
			k.value |= bit
			k.jump(space, mode, bit)
		case operator.Transfer:
			k.mask |= field
			k.value |= uint64(f.From) << mode.Shift
			k.flip |= uint64(f.From^f.To) << mode.Shift
		}
	}
	return k
}

// jump flips a two-level mode; a fermion takes the sign of the occupied
// fermion modes below it.
func (k *kernel) jump(space *basis.Space, mode basis.Mode, bit uint64) {
	if mode.Fermionic {
		below := uint64(space.FermionBits()) & (bit - 1)
		k.signs ^= below
		if bits.OnesCount64(k.flip&below)%2 == 1 {
			k.coefficient = -k.coefficient
		}
	}
	k.flip ^= bit
}

// amplitude returns the amplitude of the kernel on c, which it must match.
func (k *kernel) amplitude(c uint64) complex128 {
	if bits.OnesCount64(c&k.signs)&1 == 1 {
		return -k.coefficient
	}
	return k.coefficient
}
