package machine

import (
	"bytes"
	"fmt"
	"io"
	"reflect"
	"strconv"
	"strings"
)

// prepare shows a script's values to fmt without the interfaces they stand
// behind; errors stay errors.
func prepare(args []any) []any {
	out := make([]any, len(args))
	for i, a := range args {
		finite(a)
		if f, ok := a.(Failure); ok {
			out[i] = f
			continue
		}
		out[i] = Plain(a)
		if v, ok := out[i].(Value); ok {
			if _, ok := v.T.Method("Error"); ok {
				out[i] = Failure{v}
			}
		}
	}
	return out
}

// verbs replaces %T and %p of a script's values, which fmt handles before it
// asks a value to print itself.
func verbs(format string, args []any) (string, []any) {
	d := directives{args: prepare(args), explicit: strings.Contains(format, "[")}
	for i := 0; i < len(format); i++ {
		d.out.WriteByte(format[i])
		if format[i] == '%' {
			i = d.directive(format, i+1)
		}
	}
	return d.out.String(), d.args
}

// directives rewrites a format. Where it has argument indices, every directive
// gets one, so that arguments can be added.
type directives struct {
	out      strings.Builder
	args     []any
	n        int // next argument
	explicit bool
}

// directive copies one directive, from behind its percent sign, and returns the
// place of its verb.
func (d *directives) directive(format string, i int) int {
	for ; i < len(format) && strings.IndexByte("+-# 0123456789.*[", format[i]) >= 0; i++ {
		switch format[i] {
		case '*':
			d.index(d.width(d.n))
			d.n++
			d.out.WriteByte('*')
		case '[':
			end := strings.IndexByte(format[i:], ']')
			k, err := strconv.Atoi(format[i+1 : i+max(end, 1)])
			if err != nil { // fmt words the mistake
				d.out.WriteByte('[')
				continue
			}
			d.n = k - 1
			i += end
		default:
			d.out.WriteByte(format[i])
		}
	}
	if i >= len(format) {
		return i
	}
	if format[i] == '%' {
		d.out.WriteByte('%')
		return i
	}
	verb, n := format[i], d.n
	if n >= 0 && n < len(d.args) {
		verb, n = d.replace(verb, n)
	}
	d.index(n)
	d.out.WriteByte(verb)
	d.n++
	return i
}

func (d *directives) index(n int) {
	if d.explicit {
		fmt.Fprintf(&d.out, "[%d]", n+1)
	}
}

// width returns the argument that holds args[n] as a plain integer.
func (d *directives) width(n int) int {
	if n < 0 || n >= len(d.args) {
		return n
	}
	v, ok := Plain(d.args[n]).(Value)
	if !ok {
		return n
	}
	if d.explicit {
		d.args = append(d.args, v.V)
		return len(d.args) - 1
	}
	d.args[n] = v.V
	return n
}

// replace returns the verb and argument that print args[n] for verb.
func (d *directives) replace(verb byte, n int) (byte, int) {
	v, ok := Plain(d.args[n]).(Value)
	if !ok || verb != 'T' && verb != 'p' {
		return verb, n
	}
	x := any(typeName(v.T.Checked))
	if verb == 'p' {
		x = v.V
	} else {
		verb = 's'
	}
	if d.explicit {
		d.args = append(d.args, x)
		return verb, len(d.args) - 1
	}
	d.args[n] = x
	return verb, n
}

// line is fmt.Sprint: a space between two operands if neither is a string.
func line(args []any) string {
	args = prepare(args)
	var b bytes.Buffer
	last := false
	for i, a := range args {
		text := isText(a)
		if i > 0 && !text && !last {
			b.WriteByte(' ')
		}
		fmt.Fprint(&b, a)
		last = text
	}
	return b.String()
}

func isText(a any) bool {
	if v, ok := Plain(a).(Value); ok {
		return v.reflected().Kind() == reflect.String
	}
	return a != nil && reflect.TypeOf(a).Kind() == reflect.String
}

func sprintf(format string, args ...any) string {
	f, a := verbs(format, args)
	return fmt.Sprintf(f, a...)
}

func sprintln(args ...any) string { return fmt.Sprintln(prepare(args)...) }

func (r *Run) printing() map[string]any {
	write := func(w io.Writer, s string) (int, error) { return io.WriteString(w, s) }
	return map[string]any{
		"fmt.Sprint":   func(a ...any) string { return line(a) },
		"fmt.Sprintln": sprintln,
		"fmt.Sprintf":  sprintf,
		"fmt.Print":    func(a ...any) (int, error) { return write(r.Out(), line(a)) },
		"fmt.Println":  func(a ...any) (int, error) { return write(r.Out(), sprintln(a...)) },
		"fmt.Printf":   func(f string, a ...any) (int, error) { return write(r.Out(), sprintf(f, a...)) },
		"fmt.Fprint":   func(w io.Writer, a ...any) (int, error) { return bytesTo(w, line(a)) },
		"fmt.Fprintln": func(w io.Writer, a ...any) (int, error) { return bytesTo(w, sprintln(a...)) },
		"fmt.Fprintf":  func(w io.Writer, f string, a ...any) (int, error) { return bytesTo(w, sprintf(f, a...)) },
		"fmt.Append":   func(b []byte, a ...any) []byte { return append(b, line(a)...) },
		"fmt.Appendln": func(b []byte, a ...any) []byte { return append(b, sprintln(a...)...) },
		"fmt.Appendf":  func(b []byte, f string, a ...any) []byte { return append(b, sprintf(f, a...)...) },
		"fmt.Errorf": func(f string, a ...any) error {
			f, args := verbs(f, a)
			return fmt.Errorf(f, args...)
		},
		"fmt.Scan":    func(a ...any) (int, error) { return fmt.Fscan(r.reader(), stored(a)...) },
		"fmt.Scanln":  func(a ...any) (int, error) { return fmt.Fscanln(r.reader(), stored(a)...) },
		"fmt.Scanf":   func(f string, a ...any) (int, error) { return fmt.Fscanf(r.reader(), f, stored(a)...) },
		"fmt.Sscan":   func(s string, a ...any) (int, error) { return fmt.Sscan(s, stored(a)...) },
		"fmt.Sscanln": func(s string, a ...any) (int, error) { return fmt.Sscanln(s, stored(a)...) },
		"fmt.Sscanf":  func(s, f string, a ...any) (int, error) { return fmt.Sscanf(s, f, stored(a)...) },
		"fmt.Fscan":   func(rd io.Reader, a ...any) (int, error) { return fmt.Fscan(rd, stored(a)...) },
		"fmt.Fscanln": func(rd io.Reader, a ...any) (int, error) { return fmt.Fscanln(rd, stored(a)...) },
		"fmt.Fscanf":  func(rd io.Reader, f string, a ...any) (int, error) { return fmt.Fscanf(rd, f, stored(a)...) },
	}
}

// bytesTo writes in one call, as fmt does.
func bytesTo(w io.Writer, s string) (int, error) { return w.Write([]byte(s)) }

// stored replaces a script's values by their stored form.
func stored(args []any) []any {
	out := make([]any, len(args))
	for i, a := range args {
		out[i] = Plain(a)
		if v, ok := out[i].(Value); ok {
			out[i] = v.V
		}
	}
	return out
}

func (r *Run) reader() io.Reader {
	if r.streams.In == nil {
		return strings.NewReader("")
	}
	return r.streams.In
}
