package progress

import (
	"fmt"
	"io"
	"math"
	"os"
	"sync"
	"time"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"
)

// barWidth is the number of columns of the bar itself.
const barWidth = 24

// Display draws progress. Its methods may be called from several goroutines.
type Display struct {
	mutex sync.Mutex
	out   io.Writer // nil: silent
	bar   *progressbar.ProgressBar
	what  string
	total int64
}

// Terminal returns a display that draws on w if that is a terminal, and a silent
// one otherwise. A nil w is silent.
func Terminal(w *os.File) *Display {
	if w == nil || !term.IsTerminal(int(w.Fd())) {
		return &Display{}
	}
	return &Display{out: w}
}

// Report is the hook: work called what has come to done of total units, at rate
// units a second. A total of zero or less is unknown, a rate of zero too. When
// what or total changes the line starts anew.
func (d *Display) Report(what string, done, total int64, rate float64) {
	d.mutex.Lock()
	defer d.mutex.Unlock()
	if d.out == nil {
		return
	}
	if d.bar == nil || what != d.what || total != d.total {
		d.start(what, total)
	}
	d.bar.Describe(describe(what, done, total, rate))
	// Drawing fails only if the terminal is gone; the calculation goes on.
	if total > 0 {
		_ = d.bar.Set64(min(done, total))
	} else {
		_ = d.bar.Set64(done)
	}
}

// Close takes the line away. Later reports start a new one.
func (d *Display) Close() {
	d.mutex.Lock()
	defer d.mutex.Unlock()
	d.clear()
}

func (d *Display) clear() {
	if d.bar != nil {
		_ = d.bar.Clear()
		d.bar = nil
	}
}

func (d *Display) start(what string, total int64) {
	d.clear()
	d.what, d.total = what, total
	length := total
	if length <= 0 {
		length = -1
	}
	d.bar = progressbar.NewOptions64(length,
		progressbar.OptionSetWriter(d.out),
		progressbar.OptionSetWidth(barWidth),
		progressbar.OptionSetPredictTime(false),
		progressbar.OptionSetElapsedTime(false),
		progressbar.OptionSetTheme(progressbar.Theme{Saucer: "=", SaucerHead: ">", SaucerPadding: " ", BarStart: "[", BarEnd: "]"}),
	)
}

// describe words the state: the work, the rate and the time left.
func describe(what string, done, total int64, rate float64) string {
	s := what
	if rate > 0 && !math.IsInf(rate, 0) {
		s += "  " + perSecond(rate)
		if total > done {
			s += "  " + left(float64(total-done)/rate)
		}
	}
	return s
}

// perSecond writes a rate with three digits.
func perSecond(rate float64) string {
	for _, u := range []struct {
		size float64
		name string
	}{{1e9, " G/s"}, {1e6, " M/s"}, {1e3, " k/s"}} {
		if rate >= u.size {
			return fmt.Sprintf("%.3g%s", rate/u.size, u.name)
		}
	}
	return fmt.Sprintf("%.3g/s", rate)
}

// left writes a time in seconds as hours, minutes and seconds.
func left(seconds float64) string {
	const longest = 1000 * 24 * 3600
	if seconds > longest {
		return "more than 1000 days left"
	}
	return time.Duration(math.Ceil(seconds)*float64(time.Second)).String() + " left"
}
