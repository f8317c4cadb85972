package fence

import (
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func do(t *testing.T, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

// tree makes a folder "in" with links of every kind beside a folder "out".
func tree(t *testing.T) (in, out string) {
	t.Helper()
	top, err := filepath.EvalSymlinks(t.TempDir())
	do(t, err)
	in, out = filepath.Join(top, "in"), filepath.Join(top, "out")
	do(t, os.MkdirAll(filepath.Join(in, "a", "b"), 0o777))
	do(t, os.MkdirAll(filepath.Join(out, "a", "b"), 0o777))
	do(t, os.WriteFile(filepath.Join(out, "a", "f"), []byte("out"), 0o666))
	do(t, os.WriteFile(filepath.Join(in, "a", "f"), []byte("in"), 0o666))
	for name, to := range map[string]string{"l": "a", "u": "..", "o": "../out", "a/up": "../..", "a/b/far": out, "self": "self", "abs": filepath.Join(in, "a"), "a/d": "../../out/none"} {
		if err := os.Symlink(to, filepath.Join(in, name)); err != nil {
			t.Skipf("no links here: %v", err)
		}
	}
	return in, out
}

// TestRandomPathsStayInside follows random paths and compares the verdict with
// what the system itself makes of them.
func TestRandomPathsStayInside(t *testing.T) {
	in, out := tree(t)
	f, err := New(Options{Folder: in})
	do(t, err)
	defer f.Close()
	r := rand.New(rand.NewPCG(1, 2))
	words := []string{"a", "b", "f", "l", "u", "o", "up", "far", "abs", "d", "self", "..", ".", "", "in", "out", "none"}
	inside, refused := 0, 0
	for range 10000 {
		var list []string
		for range 1 + r.IntN(6) {
			list = append(list, words[r.IntN(len(words))])
		}
		path := strings.Join(list, "/")
		if r.IntN(4) == 0 {
			path = filepath.Join(in, "..") + "/" + path
		} else if strings.HasPrefix(path, "/") {
			path = "." + path
		}
		full := path
		if !filepath.IsAbs(path) {
			full = in + "/" + path
		}
		real, errReal := filepath.EvalSymlinks(full)
		b, err := f.readFile(path)
		switch {
		case errReal == nil && within(real, in):
			inside++
			want, errWant := os.ReadFile(full)
			if string(b) != string(want) || (err == nil) != (errWant == nil) {
				t.Fatalf("%s: %q, %v; the system has %q, %v", path, b, err, want, errWant)
			}
		case errReal == nil:
			refused++
			if !errors.Is(err, os.ErrPermission) {
				t.Fatalf("%s leads to %s and gave %q, %v", path, real, b, err)
			}
		case err == nil:
			t.Fatalf("%s gave %q where the system says %v", path, b, errReal)
		}
		if errors.Is(f.writeFile(path, []byte("in"), 0o666), nil) {
			if real, err := filepath.EvalSymlinks(full); err != nil || !within(real, in) {
				t.Fatalf("%s was written at %s, %v", path, real, err)
			}
			if filepath.Base(path) != "f" {
				do(t, f.remove(path))
			}
		}
	}
	if inside < 300 || refused < 300 {
		t.Errorf("%d paths inside, %d outside: too few of one kind", inside, refused)
	}
	if b, err := os.ReadFile(filepath.Join(out, "a", "f")); string(b) != "out" {
		t.Errorf("outside there is %q, %v", b, err)
	}
}

func TestFoldersOfOptions(t *testing.T) {
	in, out := tree(t)
	for name, o := range map[string]Options{
		"no folder": {Folder: filepath.Join(in, "none")}, "a file": {Folder: filepath.Join(in, "a", "f")}, "no file to read": {Folder: in, Read: []string{filepath.Join(out, "none")}},
	} {
		if f, err := New(o); err == nil {
			t.Errorf("%s: no error", name)
			do(t, f.Close())
		}
	}
	f, err := New(Options{Folder: in, NoFiles: true, Write: []string{filepath.Join(out, "new", "deep.txt")}, Read: []string{filepath.Join(out, "a", "f")}})
	do(t, err)
	defer f.Close()
	target := filepath.Join(out, "new", "deep.txt")
	if err := f.mkdir(filepath.Dir(target), 0o777); !errors.Is(err, os.ErrPermission) {
		t.Errorf("the folder of a file that may be written: %v", err)
	}
	do(t, os.Mkdir(filepath.Dir(target), 0o777))
	do(t, f.writeFile(target, []byte("x"), 0o666))
	if b, err := f.readFile(target); string(b) != "x" || err != nil {
		t.Errorf("%q, %v", b, err)
	}
	if b, err := f.readFile(filepath.Join(out, "a", "f")); string(b) != "out" || err != nil {
		t.Errorf("%q, %v", b, err)
	}
	if _, err := f.readFile("a/f"); !errors.Is(err, os.ErrPermission) {
		t.Errorf("without files: %v", err)
	}
}

// TestLinksMadeByTheScriptHelpNothing makes links and moves them.
func TestLinksMadeByTheScriptHelpNothing(t *testing.T) {
	in, out := tree(t)
	f, err := New(Options{Folder: in})
	do(t, err)
	defer f.Close()
	for _, target := range []string{"..", "../out", out, "a/up", "o/a"} {
		if err := f.symlink(target, "mine"); !errors.Is(err, os.ErrPermission) {
			t.Errorf("a link to %s: %v", target, err)
		}
	}
	do(t, f.symlink("../a", "a/b/near")) // in/a/a, nothing there yet
	do(t, f.mkdir("x", 0o777))
	do(t, f.symlink("../a/f", "x/f")) // in/a/f
	if b, err := f.readFile("x/f"); string(b) != "in" || err != nil {
		t.Errorf("%q, %v", b, err)
	}
	do(t, f.rename("x/f", "moved")) // now it leads to in/../a/f, which is outside
	if b, err := f.readFile("moved"); !errors.Is(err, os.ErrPermission) {
		t.Errorf("a moved link: %q, %v", b, err)
	}
}

func TestTemporaryFolderOfTheRun(t *testing.T) {
	f, err := New(Options{Folder: t.TempDir(), NoFiles: true})
	do(t, err)
	name := f.tempDir()
	do(t, f.writeFile(filepath.Join(name, "x"), nil, 0o666))
	do(t, f.Close())
	if _, err := os.Stat(name); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("%s is left: %v", name, err)
	}
}

func ExampleFence_Path() {
	f, err := New(Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	defer f.Close()
	fmt.Println(f.Path("open", "results.csv", Write))
	_, err = f.Path("open", "/etc/hosts.none", Read)
	fmt.Println(err)
	fmt.Println(errors.Is(err, os.ErrPermission))
	// Output:
	// results.csv <nil>
	// open /etc/hosts.none: a script may not read /etc/hosts.none unless it is allowed: -allow read=/etc/hosts.none
	// true
}
