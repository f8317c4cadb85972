package lower

import "reflect"

// count emits the count of a turn of a loop or of a call.
func (f *fn) count() {
	if f.c.in.Run.Counted() {
		f.line("h.Turn(%d)", f.pos)
	}
}

// bounded emits the test that n, the length that something is about to grow
// beyond, is less than a script may allocate at once.
func (f *fn) bounded(n string, elem reflect.Type) {
	size := max(int(elem.Size()), 1)
	if most := f.c.in.Run.Elements(size); most < 1<<62 {
		f.line("if %s >= %d { h.Allow(%d, %s + 1, %d) }", n, most, f.pos, n, size)
	}
}
