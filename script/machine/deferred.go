package machine

// Defers is the list of deferred calls of one call of a function, and the
// panic that is under way in it.
type Defers struct {
	run     *Run
	list    []func()
	pending *Thrown
	left    *exit
}

// NewDefers returns an empty list.
func (r *Run) NewDefers() *Defers { return &Defers{run: r} }

// Push adds a call whose function and arguments are already fixed.
func (d *Defers) Push(f func()) { d.list = append(d.list, f) }

// Do runs body and then the deferred calls, last first, whether body panics or
// not. A panic that no deferred call recovered goes on afterwards; the end of
// the program goes on at once.
func (d *Defers) Do(body func()) {
	protected(d, body)
	for len(d.list) > 0 && d.left == nil {
		f := d.list[len(d.list)-1]
		d.list = d.list[:len(d.list)-1]
		protected(d, f)
	}
	if d.left != nil {
		d.run.raise(*d.left)
	}
	if d.pending != nil {
		d.run.raise(d.pending)
	}
}

// protected runs f and keeps its panic.
//
//go:noinline
func protected(d *Defers, f func()) {
	defer func() {
		switch r := recover().(type) {
		case nil:
		case exit:
			d.left = &r
		default:
			d.pending = thrown(r)
		}
	}()
	f()
}

// Recover stops the panic under way and returns its value, or nil.
func (d *Defers) Recover() any {
	t := d.pending
	d.pending = nil
	if t == nil {
		return nil
	}
	return Plain(t.Value)
}
