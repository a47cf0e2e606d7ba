package report

import "strings"

// ascii spells the signs that reports and the bench use.
var ascii = strings.NewReplacer(
	"c†_{i+1}c_i", "c+_{i+1}c_i", "⟨", "<", "⟩", ">", "Σ", "sum", "∂", "d", "√", "sqrt",
	"−", "-", "–", "-", "·", ".", "…", "...", "→", "->", "←", "<-", "↑", "up", "↓", "down", "×", "x",
	"≥", ">=", "≤", "<=", "≈", "~", "∞", "inf", "²", "^2", "₂", "2", "Å", "A",
	"Δ", "Delta", "λ", "lambda", "χ", "chi", "Ω", "W", "ω", "w", "ħ", "h", "μ", "mu", "α", "alpha", "π", "pi", "ν", "nu", "ρ", "rho",
	"ε", "e", "ξ", "xi", "ä", "ae", "ö", "oe", "ü", "ue", "é", "e", "’", "'", "“", "\"", "”", "\"",
)

// ASCII spells a text for terminals without UTF-8. What has no spelling becomes
// "?".
func ASCII(s string) string {
	return strings.Map(func(r rune) rune {
		if r > 0x7e {
			return '?'
		}
		return r
	}, ascii.Replace(s))
}
