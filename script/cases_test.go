package script

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// testCase is a program of testdata and what belongs to it, by ending.
type testCase struct {
	name  string
	parts map[string]string
}

// readCases reads testdata/file: text before the first header is a remark,
// "-- name.ending --" starts a part.
func readCases(t testing.TB, file string) []*testCase {
	t.Helper()
	b, err := os.ReadFile(filepath.Join("testdata", file))
	if err != nil {
		t.Fatal(err)
	}
	var list []*testCase
	by := map[string]*testCase{}
	name, ending := "", ""
	for _, line := range strings.SplitAfter(string(b), "\n") {
		head := strings.TrimSuffix(line, "\n")
		if strings.HasPrefix(head, "-- ") && strings.HasSuffix(head, " --") {
			full := head[3 : len(head)-3]
			i := strings.LastIndexByte(full, '.')
			name, ending = full[:i], full[i+1:]
			if by[name] == nil {
				by[name] = &testCase{name: name, parts: map[string]string{}}
				list = append(list, by[name])
			}
			by[name].parts[ending] = ""
			continue
		}
		if name != "" {
			by[name].parts[ending] += line
		}
	}
	if len(list) == 0 {
		t.Fatalf("%s has no case", file)
	}
	return list
}
