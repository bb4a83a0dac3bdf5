package term

import (
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

func TestAlive(t *testing.T) {
	if !Alive(os.Getpid()) || Alive(0) || Alive(-1) {
		t.Error("this process, or none")
	}
	c := exec.Command("true")
	if err := c.Start(); err != nil {
		t.Skip(err)
	}
	time.Sleep(100 * time.Millisecond) // ended, and not waited for
	if Alive(c.Process.Pid) {
		t.Error("a process that has ended lives")
	}
	c.Wait()
	if Alive(c.Process.Pid) {
		t.Error("a process that is gone lives")
	}
}

func TestCrashLog(t *testing.T) {
	c := CrashLog{filepath.Join(t.TempDir(), "crash.log")}
	at := time.Date(2026, 12, 2, 4, 0, 0, 0, time.UTC)
	for _, what := range []string{"one", "two"} {
		if said := c.Write(at, errors.New(what), []byte("stack of "+what)); !strings.Contains(said, "written to "+c.Path) {
			t.Error(said)
		}
	}
	text, err := os.ReadFile(c.Path)
	if err != nil || !strings.Contains(string(text), "2026-12-02T04:00:00Z: one\nstack of one") || !strings.Contains(string(text), "stack of two") {
		t.Errorf("%s, %v", text, err)
	}
	if said := (CrashLog{"/nonexistent/folder/x"}).Write(at, "three", nil); !strings.Contains(said, "three (no crash log") {
		t.Error(said)
	}
}

func TestCopier(t *testing.T) {
	var b strings.Builder
	none := func(string) string { return "" }
	if where, err := (Copier{none, &b}).Copy("R Lep"); err != nil || where != "the clipboard" || !strings.HasPrefix(b.String(), "\x1b]52;c;UiBMZXA=") {
		t.Errorf("%q, %q, %v", b.String(), where, err)
	}
	if _, err := (Copier{none, &b}).Copy(strings.Repeat("x", clipboardLimit+1)); err == nil {
		t.Error("a text of any length is sent")
	}
}
