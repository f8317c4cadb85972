package archive

// conventions say in words what numbers cannot. They are stored with every
// sector, so that a file can be read without this program.
var conventions = []string{
	"a configuration is a word of bits with one field a mode, mode 0 in the lowest bits; modes are the sites in order, one field each; an electron site has two one-bit fields, and the down modes of all electron sites stand after all other modes",
	"levels of a site count upwards: s of a spin S has S_z = s - S; of bosons and fermions s is the number of particles; an electron site has empty 0, up 1, down 2, both 3",
	"fermions: |n> = (c_0+)^n0 (c_1+)^n1 ... |0>, modes ascending from left to right; c_m takes the sign (-1)^(occupied fermion modes below m)",
	"a symmetry sends site i to sites[i] and, for fermions, c+_m to c+ of its image, |0> to itself; its eigenvalue is exp(2 pi i turn); a translation by a has the eigenvalue exp(-i k.a)",
	"|r~> = N_r^(-1/2) sum_g conj(chi(g)) g|r>, r the smallest configuration of its orbit, N_r = |G| times the order of the stabiliser of r; without symmetries |r~> = |r>",
	"amplitude i, counted from 0, belongs to |r~> of the i-th smallest representative of the sector; the amplitude of a product state c is psi(c) = sum_r psi_r <c|r~>",
	"an operator is a sum of terms, coefficient times product of factors, the rightmost factor acting first",
}

// Phase rules of a vector.
const (
	phaseTolerance = 1e-6
	phaseFixed     = "the first amplitude whose modulus is at least 1 - 1e-6 times the largest is real and positive"
	phaseFree      = "as given"
)
