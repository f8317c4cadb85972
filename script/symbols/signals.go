package symbols

import (
	"reflect"
	"syscall"
)

// The signals that end a program; the rest of package syscall differs from
// system to system and is left out.
func init() {
	Table["syscall"] = map[string]reflect.Value{
		"SIGINT":  reflect.ValueOf(syscall.SIGINT),
		"SIGTERM": reflect.ValueOf(syscall.SIGTERM),
		"Signal":  reflect.ValueOf((*syscall.Signal)(nil)),
	}
}
