package page

import (
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"testing"
)

// FuzzText: prose is refused, or becomes well-formed markup that runs nothing and
// loads nothing.
func FuzzText(f *testing.F) {
	for _, seed := range []string{sampleText, "[x](javascript&colon;alert(1))", "![a](b)", "<script>x</script>", "[a]: b 'c\"d'\n\n[a]", "&#12;&#0;&#xFFFF;&lt;", "|a|b|\n|-|:-:|\n|`|`|$x$|", "# a\n# a\n", "> $$\n> x\n$$", "``` <\"x\n```", "- $$a\n  b$$\n1. x", "\t$$x$$", "<http://a\"b>", "$$x$$ y", "\\$ $\\$$ `$`"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, source string) {
		p := By("t", nil)
		out, err := p.prose(source)
		if err != nil {
			if !errors.Is(err, ErrFormula) && !errors.Is(err, ErrContent) {
				t.Fatalf("%q: %v", source, err)
			}
			return
		}
		d := xml.NewDecoder(strings.NewReader("<x>" + out + "</x>"))
		for {
			token, err := d.Token()
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil {
				t.Fatalf("%q: %v in\n%s", source, err, out)
			}
			start, ok := token.(xml.StartElement)
			if !ok {
				continue
			}
			switch start.Name.Local {
			case "script", "img", "style", "iframe", "object", "link", "svg":
				t.Fatalf("%q: element %s", source, start.Name.Local)
			}
			for _, a := range start.Attr {
				name, value := a.Name.Local, strings.ToLower(strings.TrimSpace(a.Value))
				if strings.HasPrefix(name, "on") || name == "style" || name == "src" ||
					name == "href" && (strings.HasPrefix(value, "//") || strings.HasPrefix(value, "javascript:") || strings.HasPrefix(value, "data:") || strings.HasPrefix(value, "vbscript:") || strings.HasPrefix(value, "/")) {
					t.Fatalf("%q: %s=%q", source, name, a.Value)
				}
			}
		}
	})
}
