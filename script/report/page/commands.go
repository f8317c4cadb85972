package page

import "unicode"

// identifiers are commands for letters.
var identifiers = map[string]string{
	"alpha": "α", "beta": "β", "gamma": "γ", "delta": "δ", "epsilon": "ϵ", "varepsilon": "ε", "zeta": "ζ", "eta": "η",
	"theta": "θ", "vartheta": "ϑ", "iota": "ι", "kappa": "κ", "lambda": "λ", "mu": "μ", "nu": "ν", "xi": "ξ", "pi": "π",
	"rho": "ρ", "varrho": "ϱ", "sigma": "σ", "varsigma": "ς", "tau": "τ", "upsilon": "υ", "phi": "ϕ", "varphi": "φ",
	"chi": "χ", "psi": "ψ", "omega": "ω",
	"Gamma": "Γ", "Delta": "Δ", "Theta": "Θ", "Lambda": "Λ", "Xi": "Ξ", "Pi": "Π", "Sigma": "Σ", "Upsilon": "Υ",
	"Phi": "Φ", "Psi": "Ψ", "Omega": "Ω",
	"hbar": "ℏ", "ell": "ℓ", "infty": "∞", "partial": "∂", "nabla": "∇", "Re": "ℜ", "Im": "ℑ", "emptyset": "∅", "imath": "ı",
	"uparrow": "↑", "downarrow": "↓", // mostly spins
}

// operators are commands for signs between or beside letters.
var operators = map[string]string{
	"pm": "±", "mp": "∓", "times": "×", "cdot": "⋅", "div": "÷", "ast": "∗", "star": "⋆", "circ": "∘", "bullet": "∙",
	"otimes": "⊗", "oplus": "⊕", "wedge": "∧", "vee": "∨", "cap": "∩", "cup": "∪", "setminus": "∖",
	"le": "≤", "leq": "≤", "ge": "≥", "geq": "≥", "ne": "≠", "neq": "≠", "ll": "≪", "gg": "≫", "approx": "≈", "equiv": "≡",
	"sim": "∼", "simeq": "≃", "cong": "≅", "propto": "∝", "in": "∈", "notin": "∉", "subset": "⊂", "subseteq": "⊆",
	"parallel": "∥", "perp": "⟂", "mid": "∣", "forall": "∀", "exists": "∃", "neg": "¬",
	"to": "→", "rightarrow": "→", "leftarrow": "←", "leftrightarrow": "↔", "mapsto": "↦",
	"Rightarrow": "⇒", "Leftarrow": "⇐", "Leftrightarrow": "⇔",
	"dagger": "†", "prime": "′", "degree": "°", "colon": ":", "ldots": "…", "dots": "…", "cdots": "⋯", "vdots": "⋮", "ddots": "⋱",
	"%": "%", "$": "$", "&": "&", "#": "#", "_": "_",
}

// brackets are commands for signs that \left and \right take.
var brackets = map[string]string{
	"langle": "⟨", "rangle": "⟩", "{": "{", "}": "}", "lbrace": "{", "rbrace": "}", "vert": "|", "lvert": "|", "rvert": "|",
	"|": "‖", "Vert": "‖", "lVert": "‖", "rVert": "‖", "lfloor": "⌊", "rfloor": "⌋", "lceil": "⌈", "rceil": "⌉",
}

// sums are large operators.
var sums = map[string]string{
	"sum": "∑", "prod": "∏", "int": "∫", "iint": "∬", "oint": "∮", "bigoplus": "⨁", "bigotimes": "⨂", "bigcup": "⋃", "bigcap": "⋂",
}

// spaces are commands for spaces and their widths.
var spaces = map[string]string{
	",": "0.1667em", ":": "0.2222em", ";": "0.2778em", " ": "0.3333em", "!": "-0.1667em", "quad": "1em", "qquad": "2em",
}

// Where the scripts of the name of a function stand.
const (
	beside  = 1
	limited = 2
)

// functions are names in upright letters.
var functions = map[string]int{
	"sin": beside, "cos": beside, "tan": beside, "cot": beside, "arcsin": beside, "arccos": beside, "arctan": beside,
	"sinh": beside, "cosh": beside, "tanh": beside, "exp": beside, "log": beside, "ln": beside, "arg": beside, "dim": beside,
	"ker": beside, "deg": beside, "det": limited, "gcd": limited, "lim": limited, "max": limited, "min": limited, "sup": limited, "inf": limited,
}

// accents are marks above, and the line below.
var accents = map[string]string{
	"hat": "^", "bar": "¯", "vec": "→", "tilde": "~", "dot": "˙", "ddot": "¨", "check": "ˇ",
	"widehat": "^", "widetilde": "~", "overline": "¯", "underline": "_",
}

// Capitals that stood in Unicode before the mathematical alphabets did.
var earlier = map[string]map[rune]rune{
	"mathcal": {'B': 'ℬ', 'E': 'ℰ', 'F': 'ℱ', 'H': 'ℋ', 'I': 'ℐ', 'L': 'ℒ', 'M': 'ℳ', 'R': 'ℛ'},
	"mathbb":  {'C': 'ℂ', 'H': 'ℍ', 'N': 'ℕ', 'P': 'ℙ', 'Q': 'ℚ', 'R': 'ℝ', 'Z': 'ℤ'},
}

// alphabet is the capital letter c in the style of a command.
func alphabet(name string, c rune) (rune, bool) {
	if c > unicode.MaxASCII || !unicode.IsUpper(c) {
		return 0, false
	}
	if e, ok := earlier[name][c]; ok {
		return e, true
	}
	first := rune(0x1D49C) // script A
	if name == "mathbb" {
		first = 0x1D538
	}
	return first + c - 'A', true
}
