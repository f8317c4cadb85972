package manual

import (
	"errors"
	"strings"
	"testing"
)

func TestPages(t *testing.T) {
	for subject, says := range map[string]string{
		"basis":                      "package ketloom/basis\n",
		"ketloom/operator/matrix":    "package ketloom/operator/matrix\n",
		"operator/matrix":            "Estimate",
		"matrix.New":                 "func New(ctx context.Context, op operator.Operator",
		"lanczos.lowest":             "func Lowest(",
		"basis.Basis.Len":            "func (b *Basis) Len() int",
		"lanczos.Options":            "Tolerance",
		"basis.ErrEmpty":             "ErrEmpty",
		"ketloom/basis/group.Turn":   "exp(2πi·Num/Den)",
		"entangle.Exclusion.OnTorus": "lattice",
	} {
		text, err := Page(subject)
		if err != nil || !strings.Contains(text, says) {
			t.Errorf("%s: %v\n%s\nwant a page that says %q", subject, err, text, says)
		}
	}
	for subject, says := range map[string]string{
		"nothing":       "the packages are ketloom/basis",
		"basis.Nothing": "no such page",
		"lanczos.Low":   "close to it: lanczos.Lowest",
		"":              "the packages are",
		".":             "the packages are",
	} {
		if _, err := Page(subject); !errors.Is(err, ErrNoPage) || !strings.Contains(err.Error(), says) {
			t.Errorf("%q: %v, want an error that says %q", subject, err, says)
		}
	}
}

// Every exported name of every package has a comment.
func TestEveryNameIsExplained(t *testing.T) {
	list, err := load()
	if err != nil {
		t.Fatal(err)
	}
	if len(list) < 10 {
		t.Fatalf("%d packages", len(list))
	}
	for _, p := range list {
		if len(p.Text) < 100 || len(p.Entries) == 0 {
			t.Errorf("%s: %d names, package comment %q", p.Path, len(p.Entries), p.Text)
		}
		for _, e := range p.Entries {
			if e.Text == "" && !strings.Contains(e.Declaration, "//") {
				t.Errorf("%s.%s has no comment", p.Path, e.Name)
			}
		}
	}
}
