package page

import _ "embed"

// style is the look of every page.
//
//go:embed style.css
var style string
