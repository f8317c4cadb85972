package lower

// unavailable names functions that would act on the whole program, or show how
// it is built, and says what to do instead.
var unavailable = map[string]string{
	"os.Chdir":             "it would change the folder of the whole program; use path/filepath to build paths",
	"os.Setenv":            "it would change the environment of the whole program",
	"os.Unsetenv":          "it would change the environment of the whole program",
	"os.Clearenv":          "it would change the environment of the whole program",
	"os.StartProcess":      "a script starts no programs",
	"os.FindProcess":       "a script signals no programs",
	"runtime.Goexit":       "return from the function instead",
	"runtime.GOMAXPROCS":   "it would change the whole program; give Workers to the calls that have it",
	"runtime.LockOSThread": "the interpreter has its own threads",
	"runtime.Caller":       "it would show the interpreter",
	"runtime.Callers":      "it would show the interpreter",
	"runtime.Stack":        "it would show the interpreter",
	"runtime.FuncForPC":    "it would show the interpreter",
	"runtime.SetFinalizer": "values of a script are kept in another form",
	"runtime.AddCleanup":   "values of a script are kept in another form",

	"flag.NewFlagSet":       "use the functions of package flag itself",
	"(*log.Logger).Fatal":   "print, then call os.Exit",
	"(*log.Logger).Fatalf":  "print, then call os.Exit",
	"(*log.Logger).Fatalln": "print, then call os.Exit",
}
