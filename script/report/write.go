package report

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"hash/crc32"
	"html"
	"io"
	"math"
	"path/filepath"
	"strings"
	"time"

	"codeberg.org/go-pdf/fpdf"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/vgimg"
	"gonum.org/v1/plot/vg/vgpdf"
	"gonum.org/v1/plot/vg/vgsvg"
)

// plan fixes the places of a figure and returns what paints its data.
type plan func() (p *panel, paint func(), err error)

// The library that writes PDF takes the dates of a document from defaults of the
// process; a fixed one keeps the bytes the same from day to day.
func init() {
	constant := time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC)
	fpdf.SetDefaultCreationDate(constant)
	fpdf.SetDefaultModificationDate(constant)
	fpdf.SetDefaultCatalogSort(true)
}

func write(w io.Writer, format, kind string, f plan) error {
	data, err := render(format, kind, f)
	if err != nil {
		return err
	}
	if _, err := w.Write(data); err != nil {
		return fmt.Errorf("report: %s: %w", kind, err)
	}
	return nil
}

func save(path, kind string, f plan) error {
	data, err := render(ending(path), kind, f)
	if err != nil {
		return err
	}
	if err := replace(path, data); err != nil {
		return fmt.Errorf("report: %s: %w", kind, err)
	}
	return nil
}

// ending is the format that the name of a file asks for.
func ending(path string) string {
	return strings.ToLower(strings.TrimPrefix(filepath.Ext(path), "."))
}

func render(format, kind string, f plan) ([]byte, error) {
	if format != "svg" && format != "png" && format != "pdf" {
		return nil, fmt.Errorf("report: %s: %w %q; give svg, png or pdf, as the ending of the file", kind, ErrFormat, format)
	}
	p, paint, err := f()
	if err != nil {
		return nil, fmt.Errorf("report: %s: %w", kind, err)
	}
	canvas := newCanvas(format, p)
	p.start(canvas)
	paint()
	var buf bytes.Buffer
	if _, err := canvas.WriteTo(&buf); err != nil {
		return nil, fmt.Errorf("report: %s: %w", kind, err)
	}
	switch format {
	case "svg":
		return describedSVG(buf.Bytes(), p), nil
	case "png":
		return describedPNG(buf.Bytes(), p), nil
	}
	return buf.Bytes(), nil
}

func newCanvas(format string, p *panel) vg.CanvasWriterTo {
	w, h := vg.Length(p.width), vg.Length(p.height)
	switch format {
	case "svg":
		return vgsvg.New(w, h)
	case "png":
		return vgimg.PngCanvas{Canvas: vgimg.NewWith(vgimg.UseWH(w, h), vgimg.UseDPI(int(p.page.Dots)))}
	default:
		return vgpdf.New(w, h)
	}
}

// heading is the title of the figure as plain text.
func (p *panel) heading() string {
	if p.page.Title == "" {
		return p.name
	}
	return unmarked(p.page.Title)
}

// describedSVG puts title and note where programs that read aloud look for them.
func describedSVG(data []byte, p *panel) []byte {
	text := "<title>" + html.EscapeString(p.heading()) + "</title>\n"
	if p.page.Note != "" {
		text += "<desc>" + html.EscapeString(unmarked(p.page.Note)) + "</desc>\n"
	}
	end := bytes.IndexByte(data[bytes.Index(data, []byte("<svg")):], '>') + bytes.Index(data, []byte("<svg")) + 2
	return bytes.Join([][]byte{data[:end], []byte(text), data[end:]}, nil)
}

// describedPNG adds the resolution, so that the picture is printed at its size,
// and title and note: chunks pHYs and iTXt of ISO/IEC 15948 (2004), behind the
// header of 33 bytes.
func describedPNG(data []byte, p *panel) []byte {
	const header = 33
	metre := uint32(math.Round(p.page.Dots / 0.0254))
	size := binary.BigEndian.AppendUint32(nil, metre)
	size = append(binary.BigEndian.AppendUint32(size, metre), 1)
	out := append([]byte(nil), data[:header]...)
	out = appendChunk(out, "pHYs", size)
	out = appendChunk(out, "iTXt", []byte("Title\x00\x00\x00\x00\x00"+p.heading()))
	if p.page.Note != "" {
		out = appendChunk(out, "iTXt", []byte("Description\x00\x00\x00\x00\x00"+unmarked(p.page.Note)))
	}
	return append(out, data[header:]...)
}

func appendChunk(out []byte, kind string, data []byte) []byte {
	out = binary.BigEndian.AppendUint32(out, uint32(len(data)))
	from := len(out)
	out = append(append(out, kind...), data...)
	return binary.BigEndian.AppendUint32(out, crc32.ChecksumIEEE(out[from:]))
}
