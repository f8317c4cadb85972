package machine

import (
	"bufio"
	"bytes"
	"io"
	"log"
	"math/big"
	"strings"
	"sync"
)

// contained are functions and methods in place of compiled ones that can end the
// whole program: by an allocation that the system refuses, or by what the
// runtime takes for a fatal error.
func (r *Run) contained() map[string]any {
	return map[string]any{
		"strings.Repeat":         func(s string, n int) string { r.allow(n, len(s)); return strings.Repeat(s, n) },
		"bytes.Repeat":           func(b []byte, n int) []byte { r.allow(n, len(b)); return bytes.Repeat(b, n) },
		"(strings.Builder).Grow": func(b *strings.Builder, n int) { r.allow(n, 1); b.Grow(n) },
		"(bytes.Buffer).Grow":    func(b *bytes.Buffer, n int) { r.allow(n, 1); b.Grow(n) },
		"bufio.NewReaderSize":    func(rd io.Reader, n int) *bufio.Reader { r.allow(n, 1); return bufio.NewReaderSize(rd, n) },
		"bufio.NewWriterSize":    func(w io.Writer, n int) *bufio.Writer { r.allow(n, 1); return bufio.NewWriterSize(w, n) },
		"(math/big.Int).Lsh": func(z, x *big.Int, n uint) *big.Int {
			r.allow(int(min(n/8, 1<<62)), 1)
			return z.Lsh(x, n)
		},
		"(math/big.Int).SetBit": func(z, x *big.Int, i int, b uint) *big.Int {
			r.allow(i/8, 1)
			return z.SetBit(x, i, b)
		},
		"(log.Logger).Print":     func(l *log.Logger, a ...any) { l.Print(prepare(a)...) },
		"(log.Logger).Println":   func(l *log.Logger, a ...any) { l.Println(prepare(a)...) },
		"(log.Logger).Printf":    func(l *log.Logger, f string, a ...any) { f, a = verbs(f, a); l.Printf(f, a...) },
		"(log.Logger).Panic":     func(l *log.Logger, a ...any) { l.Panic(prepare(a)...) },
		"(log.Logger).Panicln":   func(l *log.Logger, a ...any) { l.Panicln(prepare(a)...) },
		"(log.Logger).Panicf":    func(l *log.Logger, f string, a ...any) { f, a = verbs(f, a); l.Panicf(f, a...) },
		"(sync.Mutex).Unlock":    unlock,
		"(sync.RWMutex).Unlock":  unlockWriter,
		"(sync.RWMutex).RUnlock": unlockReader,
		"(sync.Cond).Wait":       wait,
	}
}

// An unlock of what is not locked is fatal to the program. Nobody can take a lock
// that is held, so taking it shows that it was not.

func unlock(m *sync.Mutex) {
	if m.TryLock() {
		m.Unlock()
		panic(plainFault("fatal error: sync: unlock of unlocked mutex"))
	}
	m.Unlock()
}

func unlockWriter(m *sync.RWMutex) {
	if m.TryRLock() {
		m.RUnlock()
		panic(plainFault("fatal error: sync: Unlock of unlocked RWMutex"))
	}
	m.Unlock()
}

func unlockReader(m *sync.RWMutex) {
	if m.TryLock() {
		m.Unlock()
		panic(plainFault("fatal error: sync: RUnlock of unlocked RWMutex"))
	}
	m.RUnlock()
}

func wait(c *sync.Cond) {
	if m, ok := c.L.(*sync.Mutex); ok && m.TryLock() {
		m.Unlock()
		panic(plainFault("fatal error: sync: unlock of unlocked mutex"))
	}
	c.Wait()
}
