package symbols

import (
	"os/exec"
	"testing"
)

func TestTablesAreFresh(t *testing.T) {
	tool, err := exec.LookPath("go")
	if err != nil {
		t.Skip("no Go tool: the tables are not compared with the packages")
	}
	if out, err := exec.Command(tool, "run", "./generate", "-check").CombinedOutput(); err != nil {
		t.Errorf("%v\n%s", err, out)
	}
}
