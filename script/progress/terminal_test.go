package progress

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestSilentWithoutTerminal(t *testing.T) {
	path := filepath.Join(t.TempDir(), "out")
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	d := Terminal(f)
	d.Report("work", 1, 10, 3)
	d.Report("work", 10, 10, 3)
	d.Report("search", 3, 0, 0)
	d.Close()
	if b, err := os.ReadFile(path); err != nil || len(b) != 0 {
		t.Errorf("wrote %q, %v to a file that is no terminal", b, err)
	}
	Terminal(nil).Report("work", 1, 2, 0)
}

func TestDrawsRateAndTimeLeft(t *testing.T) {
	var out bytes.Buffer
	d := &Display{out: &out}
	d.Report("enumerate", 250, 1000, 50)
	d.Close()
	if s := out.String(); !strings.Contains(s, "enumerate") || !strings.Contains(s, "50/s") || !strings.Contains(s, "15s left") || !strings.Contains(s, "25%") {
		t.Errorf("drew %q; want the work, 50/s, 15s left and 25%%", s)
	}
}

func TestUnknownTotalAndOvershoot(t *testing.T) {
	var out bytes.Buffer
	d := &Display{out: &out}
	d.Report("steps", 5, 0, 0)
	d.Report("steps", 7, 0, 2)
	d.Report("elements", 12, 10, 1)
	d.Report("elements", -1, 10, 1)
	d.Close()
	if s := out.String(); !strings.Contains(s, "steps") || !strings.Contains(s, "elements") {
		t.Errorf("drew %q", s)
	}
}

func TestWording(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{perSecond(2.5e6), "2.5 M/s"},
		{perSecond(999), "999/s"},
		{perSecond(3.21e9), "3.21 G/s"},
		{left(3599.2), "1h0m0s left"},
		{left(1e12), "more than 1000 days left"},
		{describe("a", 1, 0, 0), "a"},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
}

func ExampleTerminal() {
	show := Terminal(os.Stdout) // no terminal in a test
	defer show.Close()
	show.Report("enumerate", 3, 10, 1)
	fmt.Println("done")
	// Output: done
}
