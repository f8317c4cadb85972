package host

// Return hands a value to the host under a name. Names may repeat; the host sees
// every call, in order, before Return returns. The value must be of a
// predeclared or compiled type, or built of such types: []float64,
// map[string]string, *lanczos.Result. Slices, maps and pointers are shared, not copied.
//
// Compiled, and where the host does not ask for values, it does nothing.
func Return(name string, value any) {}
