package script

import (
	"fmt"
	"go/token"
	"regexp"
	"strconv"
	"strings"

	"ketloom/script/lower"
)

var place = regexp.MustCompile(`^(?:[^:\s]*:)?(\d+):\d+: `)

// internal reports that the interpreter did not accept a lowered program. That
// is a fault of the lowering; the script is refused with the line at which it
// happened.
func (s *source) internal(p *lower.Program, err error) error {
	text := err.Error()
	message := fmt.Sprintf("this statement is not available in a script; write it in simpler steps (%s)", text)
	if m := place.FindStringSubmatch(text); m != nil {
		n, _ := strconv.Atoi(m[1])
		if pos := lineOf(p.Source, n); pos.IsValid() {
			return Problems{s.at(pos, "%s", message)}
		}
	}
	return Problems{{File: s.name, Message: message}}
}

// lineOf reads the place of the script from a line of the lowered program.
func lineOf(text string, n int) token.Pos {
	lines := strings.Split(text, "\n")
	for ; n > 0 && n <= len(lines); n-- {
		if i := strings.LastIndex(lines[n-1], " //"); i >= 0 {
			if pos, err := strconv.Atoi(lines[n-1][i+3:]); err == nil {
				return token.Pos(pos)
			}
		}
	}
	return token.NoPos
}
