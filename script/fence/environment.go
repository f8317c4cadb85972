package fence

import (
	"errors"
	"os"
)

var errEnvironment = errors.New("a script does not see the environment unless it is allowed: -allow env")

// environment is that of a program without any.
func environment() map[string]any {
	hidden := func() (string, error) { return "", errEnvironment }
	return map[string]any{
		"os.Getenv":        func(string) string { return "" },
		"os.LookupEnv":     func(string) (string, bool) { return "", false },
		"os.Environ":       func() []string { return nil },
		"os.ExpandEnv":     func(s string) string { return os.Expand(s, func(string) string { return "" }) },
		"os.Hostname":      hidden,
		"os.UserHomeDir":   hidden,
		"os.UserCacheDir":  hidden,
		"os.UserConfigDir": hidden,
	}
}
