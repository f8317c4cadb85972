package archive

import (
	"errors"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"

	"ketloom/basis"
)

// names returns the files of a folder.
func names(t testing.TB, folder string) []string {
	t.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, e := range entries {
		list = append(list, e.Name())
	}
	return list
}

func only(t testing.TB, folder string, want ...string) {
	t.Helper()
	if got := names(t, folder); strings.Join(got, " ") != strings.Join(want, " ") {
		t.Errorf("the folder holds %v, expected %v", got, want)
	}
}

func sectorOf(t testing.TB) Sector {
	t.Helper()
	b := ring(t, 6, basis.SpinHalf(), 0, nil)
	return Sector{Basis: b, Operator: heisenberg(b.Space()), Result: invented(b, 1, false, rand.New(rand.NewPCG(61, 62)))}
}

// An old file stands until Close has succeeded, whatever ends the writer.
func TestOldFileStands(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "a.ket")
	begin := func() *Writer {
		t.Helper()
		w, err := Create(path)
		if err != nil {
			t.Fatal(err)
		}
		if err := w.Add(sectorOf(t)); err != nil {
			t.Fatal(err)
		}
		return w
	}
	old := []byte("the old file")
	if err := os.WriteFile(path, old, 0o666); err != nil {
		t.Fatal(err)
	}
	stands := func() {
		t.Helper()
		only(t, folder, "a.ket")
		if string(mustRead(t, path)) != string(old) {
			t.Fatal("the old file has changed")
		}
	}

	begin().Discard()
	stands()

	w := begin()
	if len(names(t, folder)) != 2 {
		t.Fatalf("no temporary file: %v", names(t, folder))
	}
	DiscardOpen()
	stands()
	if err := w.Close(); err == nil {
		t.Error("a discarded archive was closed")
	}
	stands()

	w = begin()
	w.file.Close() // the disk fails
	if err := w.Add(sectorOf(t)); err == nil {
		t.Error("adding to a file that fails")
	}
	if err := w.Close(); err == nil {
		t.Error("closing a file that fails")
	}
	stands()

	w = begin()
	w.body.Sectors[0].Solver = []byte("{") // descriptions that cannot be written
	if err := w.Close(); err == nil {
		t.Error("closing without descriptions")
	}
	stands()

	w = begin()
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	only(t, folder, "a.ket")
	if err := opened(t, path).Verify(t.Context()); err != nil {
		t.Error(err)
	}
}

// A writer that is closed or discarded says so.
func TestAfterTheEnd(t *testing.T) {
	for _, end := range []func(*Writer){func(w *Writer) { _ = w.Close() }, (*Writer).Discard} {
		folder := t.TempDir()
		w, err := Create(filepath.Join(folder, "a.ket"))
		if err != nil {
			t.Fatal(err)
		}
		end(w)
		before := names(t, folder)
		if w.Add(sectorOf(t)) == nil || w.Close() == nil || w.SetCreated(epoch) == nil {
			t.Error("the writer goes on")
		}
		w.Note("a", "b")
		w.Discard()
		DiscardOpen()
		only(t, folder, before...)
	}
}

func TestCreateRefuses(t *testing.T) {
	folder := t.TempDir()
	for _, path := range []string{"", folder, filepath.Join(folder, "none", "a.ket"), filepath.Join(folder, strings.Repeat("x", 255))} {
		if w, err := Create(path); err == nil {
			w.Discard()
			t.Errorf("%.40q: created", path)
		}
	}
	only(t, folder)
	if _, err := Create(filepath.Join(folder, "none", "a.ket")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a folder that does not exist: %v", err)
	}
	w, err := Create(filepath.Join(folder, "a.ket"))
	if err != nil {
		t.Fatal(err)
	}
	if err := w.Add(sectorOf(t)); err != nil {
		t.Fatal(err)
	}
	if err := w.SetCreated(epoch); err == nil {
		t.Error("the time was set after the head was written")
	}
	if err := os.Mkdir(filepath.Join(folder, "a.ket"), 0o777); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err == nil {
		t.Error("an archive stands at the place of a folder")
	}
	only(t, folder, "a.ket")
}

// A new file has the permissions that the system gives to new files.
func TestPermissions(t *testing.T) {
	folder := t.TempDir()
	plain := filepath.Join(folder, "plain")
	if err := os.WriteFile(plain, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	want, err := os.Stat(plain)
	if err != nil {
		t.Fatal(err)
	}
	got, err := os.Stat(write(t))
	if err != nil || got.Mode() != want.Mode() {
		t.Errorf("mode %v, a new file has %v: %v", got.Mode(), want.Mode(), err)
	}
}

// DiscardOpen amid writers that come and go leaves whole files or none.
func TestDiscardOpenConcurrently(t *testing.T) {
	folder := t.TempDir()
	s := sectorOf(t)
	var writers sync.WaitGroup
	for g := range 4 {
		writers.Go(func() {
			for range 20 {
				w, err := Create(filepath.Join(folder, string(rune('a'+g))))
				if err != nil {
					t.Error(err)
					return
				}
				_ = w.Add(s)
				_ = w.Close()
				w.Discard()
			}
		})
	}
	stop, stopped := make(chan struct{}), make(chan struct{})
	go func() {
		defer close(stopped)
		for {
			select {
			case <-stop:
				return
			default:
				DiscardOpen()
			}
		}
	}()
	writers.Wait()
	close(stop)
	<-stopped
	for _, name := range names(t, folder) {
		if strings.HasPrefix(name, ".") {
			t.Errorf("%s is left", name)
			continue
		}
		if err := opened(t, filepath.Join(folder, name)).Verify(t.Context()); err != nil {
			t.Error(err)
		}
	}
}

// A program that is killed leaves the old file, and its temporary file beside.
func TestKilled(t *testing.T) {
	if folder := os.Getenv("ARCHIVE_TEST_FOLDER"); folder != "" {
		dieWriting(t, folder)
	}
	folder := t.TempDir()
	path := filepath.Join(folder, "a.ket")
	if err := os.WriteFile(path, []byte("old"), 0o666); err != nil {
		t.Fatal(err)
	}
	program, err := os.Executable()
	if err != nil {
		t.Skip(err)
	}
	child := exec.Command(program, "-test.run=^TestKilled$")
	child.Env = append(os.Environ(), "ARCHIVE_TEST_FOLDER="+folder)
	out, err := child.CombinedOutput()
	if child.ProcessState == nil || child.ProcessState.Success() || !strings.Contains(string(out), "about to die") {
		t.Fatalf("the program did not die: %v\n%s", err, out)
	}
	if string(mustRead(t, path)) != "old" {
		t.Error("the old file has changed")
	}
	list := names(t, folder)
	if len(list) != 2 || !strings.HasPrefix(list[0], ".a.ket.") {
		t.Fatalf("the folder holds %v", list)
	}
	if _, err := Open(filepath.Join(folder, list[0])); !errors.Is(err, ErrDamaged) {
		t.Errorf("an unfinished file was opened: %v", err)
	}
}

func dieWriting(t *testing.T, folder string) {
	w, err := Create(filepath.Join(folder, "a.ket"))
	if err != nil {
		t.Fatal(err)
	}
	if err := w.Add(sectorOf(t)); err != nil {
		t.Fatal(err)
	}
	os.Stdout.WriteString("about to die\n")
	self, err := os.FindProcess(os.Getpid())
	if err != nil {
		t.Fatal(err)
	}
	_ = self.Kill()
	select {}
}
