//go:build unix

package main

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/creack/pty"

	"evenfall/astro/check"
)

// screen is the built program on a terminal that answers nothing.
type screen struct {
	t   *testing.T
	cmd *exec.Cmd
	tty *os.File
	mu  sync.Mutex
	raw bytes.Buffer
}

func open(t *testing.T, env ...string) *screen {
	t.Helper()
	bin := filepath.Join(t.TempDir(), "evenfall")
	build := exec.Command("go", "build", "-o", bin, "./cmd/evenfall")
	build.Dir = check.Root(t)
	if out, err := build.CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	s := &screen{t: t, cmd: exec.Command(bin, "--at", "2026-12-03T03:00:00Z")}
	s.cmd.Dir = t.TempDir()
	s.cmd.Env = append(append(os.Environ(), "TERM=xterm-256color", "LANG=C.UTF-8", "CI="), env...)
	tty, err := pty.StartWithSize(s.cmd, &pty.Winsize{Rows: 24, Cols: 80})
	if err != nil {
		t.Fatal(err)
	}
	s.tty = tty
	t.Cleanup(func() { s.cmd.Process.Kill(); tty.Close() })
	go func() {
		buf := make([]byte, 4096)
		for {
			n, err := tty.Read(buf)
			s.mu.Lock()
			s.raw.Write(buf[:n])
			s.mu.Unlock()
			if err != nil {
				return
			}
		}
	}()
	return s
}

func (s *screen) text() string {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.raw.String()
}

// see waits until the terminal has been sent a text.
func (s *screen) see(what string, patience time.Duration) {
	s.t.Helper()
	for end := time.Now().Add(patience); time.Now().Before(end); time.Sleep(10 * time.Millisecond) {
		if strings.Contains(s.text(), what) {
			return
		}
	}
	s.t.Fatalf("no %q within %v in %q", what, patience, s.text())
}

// The terminal is asked nothing, the first frame does not wait for an answer
// (unanswered, the question costs 5 s), keys move, q leaves and the terminal
// is restored.
func TestTerminal(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program and runs it in a terminal; not with -short")
	}
	s := open(t)
	s.see("j down", 4*time.Second)
	for _, query := range []string{"]11;?", "[6n", "]10;?"} {
		if strings.Contains(s.text(), query) {
			t.Errorf("the terminal was asked %q", query)
		}
	}
	if !strings.Contains(s.text(), "DEMONSTRATION") {
		t.Error("the demonstration does not say so")
	}
	if _, err := s.tty.WriteString("jjj"); err != nil {
		t.Fatal(err)
	}
	s.see("> NGC 246", 5*time.Second)
	if _, err := s.tty.WriteString("q"); err != nil {
		t.Fatal(err)
	}
	ended := make(chan error, 1)
	go func() { ended <- s.cmd.Wait() }()
	select {
	case err := <-ended:
		if err != nil {
			t.Errorf("after q: %v", err)
		}
	case <-time.After(5 * time.Second):
		t.Fatal("q does not end the program")
	}
	s.see("[?1049l", time.Second)
}
