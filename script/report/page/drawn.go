package page

import (
	"bytes"
	"encoding/base64"
	"fmt"
	"reflect"

	"ketloom/script/report"
)

// drawn is a figure as HTML.
func (p *Page) drawn(figure Drawing, caption, id string) (string, error) {
	if v := reflect.ValueOf(figure); !v.IsValid() || v.Kind() == reflect.Pointer && v.IsNil() {
		return "", fmt.Errorf("%w: nil; give a figure", ErrContent)
	}
	var picture bytes.Buffer
	if err := figure.Write(&picture, "svg"); err != nil {
		return "", err
	}
	inline, err := inlined(picture.Bytes(), id)
	if err != nil {
		return "", err
	}
	words, err := p.line(caption)
	if err != nil {
		return "", fmt.Errorf("caption: %w", err)
	}
	links := download("SVG", id+".svg", "image/svg+xml", picture.Bytes())
	if has, ok := figure.(interface{ Data() (report.Table, error) }); ok {
		data, err := has.Data()
		if err != nil {
			return "", err
		}
		link, err := spreadsheet(data, id)
		if err != nil {
			return "", err
		}
		links += " " + link
	}
	return fmt.Sprintf("<figure id=%q>\n<div class=\"plate\">%s</div>\n<figcaption>%s<p class=\"files\">%s</p></figcaption>\n</figure>\n",
		id, inline, captioned(words), links), nil
}

func captioned(words string) string {
	if words == "" {
		return ""
	}
	return "<p>" + words + "</p>"
}

// download is a link to a file that the page carries in itself.
func download(label, name, kind string, data []byte) string {
	return fmt.Sprintf(`<a download="%s" aria-label="%s" href="data:%s;base64,%s">%s</a>`, name, name, kind, base64.StdEncoding.EncodeToString(data), label)
}
