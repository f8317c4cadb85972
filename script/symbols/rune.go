package symbols

import "go/constant"

// Rune marks an untyped constant whose default type is rune.
type Rune struct{ Exact constant.Value }

// Constant returns the value.
func (r Rune) Constant() constant.Value { return r.Exact }
