package page

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"io"
	"net/url"
	"os"
	"path/filepath"
	"strconv"
)

// archive is a file that the page leads to.
type archive struct {
	path  string // absolute
	holds string // HTML
	size  int64
	sum   string
}

// Archive appends a link to a file with what it holds (a paragraph of Markdown),
// its size and its SHA-256, which is computed at once by reading the file through.
// The link is relative to the page, so the two have to be moved together.
//
// Errors: a file that is not there or cannot be read. They are returned at once;
// those of holds are kept for Save.
func (p *Page) Archive(path, holds string) error {
	if !p.ready() {
		return p.err
	}
	p.archives++
	words, err := p.line(holds)
	if err != nil {
		p.fail(fmt.Errorf("page: archive %d: %w", p.archives, err))
	}
	a, err := summed(path)
	if err != nil {
		return fmt.Errorf("page: archive %d: %w; write the file before the page speaks of it", p.archives, err)
	}
	a.holds = words
	p.body = append(p.body, part{archive: a})
	return nil
}

// summed reads a file through.
func summed(path string) (*archive, error) {
	place, err := filepath.Abs(path)
	if err != nil {
		return nil, err
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	if info, err := f.Stat(); err != nil || !info.Mode().IsRegular() {
		return nil, errors.Join(err, fmt.Errorf("%w: %s is not a file", ErrContent, path))
	}
	h := sha256.New()
	size, err := io.Copy(h, f)
	if err != nil {
		return nil, err
	}
	return &archive{path: place, size: size, sum: fmt.Sprintf("%x", h.Sum(nil))}, nil
}

// markup is the link from a page in a folder.
func (a *archive) markup(folder string) (string, error) {
	from, err := filepath.Abs(folder)
	if err != nil {
		return "", fmt.Errorf("page: %w", err)
	}
	rel, err := filepath.Rel(from, a.path)
	if err != nil {
		return "", fmt.Errorf("page: no relative link leads from the page to %s; save both on one drive: %w", a.path, err)
	}
	rel = filepath.ToSlash(rel)
	if err := checkText("name of an archive", rel); err != nil {
		return "", fmt.Errorf("page: %w", err)
	}
	holds := ""
	if a.holds != "" {
		holds = ": " + a.holds
	}
	return fmt.Sprintf("<p class=\"archive\"><a href=\"%s\">%s</a>%s<br />%s, SHA-256 <code>%s</code></p>\n",
		escape((&url.URL{Path: rel}).String()), escape(rel), holds, bytesText(a.size), a.sum), nil
}

// bytesText is a size in bytes, with its digits in groups of three.
func bytesText(n int64) string {
	s := strconv.FormatInt(n, 10)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + "\u202f" + s[i:]
	}
	if n == 1 {
		return s + " byte"
	}
	return s + " bytes"
}
