//go:build unix

package main

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"

	"github.com/creack/pty"

	"evenfall/astro/check"
)

// build makes the program once for all tests of this file.
var build = sync.OnceValues(func() (string, error) {
	dir, err := os.MkdirTemp("", "evenfall-test")
	if err != nil {
		return "", err
	}
	bin := filepath.Join(dir, "evenfall")
	cmd := exec.Command("go", "build", "-o", bin, ".")
	if out, err := cmd.CombinedOutput(); err != nil {
		return "", fmt.Errorf("%w\n%s", err, out)
	}
	return bin, nil
})

func built(t *testing.T) string {
	t.Helper()
	if testing.Short() {
		t.Skip("builds the program and runs it in a terminal; not with -short")
	}
	check.Root(t)
	bin, err := build()
	if err != nil {
		t.Fatal(err)
	}
	return bin
}

// screen is the built program on a terminal that answers nothing.
type screen struct {
	t     *testing.T
	cmd   *exec.Cmd
	tty   *os.File
	mu    sync.Mutex
	raw   bytes.Buffer
	stall atomic.Bool
	ended chan error
}

func open(t *testing.T, args []string, env ...string) *screen {
	t.Helper()
	bin := built(t)
	s := &screen{t: t, ended: make(chan error, 1), cmd: exec.Command(bin, args...)}
	s.cmd.Dir = t.TempDir()
	s.cmd.Env = append(append(os.Environ(), "TERM=xterm-256color", "LANG=C.UTF-8", "CI=", "TMUX="), env...)
	tty, err := pty.StartWithSize(s.cmd, &pty.Winsize{Rows: 24, Cols: 80})
	if err != nil {
		t.Fatal(err)
	}
	s.tty = tty
	t.Cleanup(func() { s.cmd.Process.Kill(); tty.Close() })
	go s.read()
	go func() { s.ended <- s.cmd.Wait() }()
	return s
}

func (s *screen) read() {
	buf := make([]byte, 4096)
	for {
		for s.stall.Load() {
			time.Sleep(5 * time.Millisecond)
		}
		n, err := s.tty.Read(buf)
		s.mu.Lock()
		s.raw.Write(buf[:n])
		s.mu.Unlock()
		if err != nil {
			return
		}
	}
}

func (s *screen) text() string {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.raw.String()
}

// forget drops what the terminal has been sent so far.
func (s *screen) forget() {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.raw.Reset()
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

func (s *screen) press(keys string) {
	s.t.Helper()
	if _, err := s.tty.WriteString(keys); err != nil {
		s.t.Fatal(err)
	}
}

// gone waits for the end and returns the exit status.
func (s *screen) gone(within time.Duration) int {
	s.t.Helper()
	select {
	case err := <-s.ended:
		var exit *exec.ExitError
		if errors.As(err, &exit) {
			return exit.ExitCode()
		}
		if err != nil {
			s.t.Fatal(err)
		}
		return 0
	case <-time.After(within):
		s.t.Fatalf("still there after %v", within)
	}
	return -1
}

var atNight = []string{"--at", "2026-12-03T03:00:00Z"}

// restored tells whether the terminal's mode is a shell's again.
func restored(t *testing.T, tty *os.File) bool {
	t.Helper()
	mode, err := modeOf(tty)
	if err != nil {
		t.Fatal(err)
	}
	return mode
}

// The terminal is asked nothing, the first frame does not wait for an answer
// (unanswered, the question costs 5 s), keys move, q leaves and the terminal
// is restored.
func TestTerminal(t *testing.T) {
	s := open(t, atNight)
	began := time.Now()
	s.see("enter star", 3*time.Second)
	t.Logf("first frame after %v", time.Since(began).Round(time.Millisecond))
	for _, query := range []string{"]11;?", "[6n", "]10;?", "[c", "[?u"} {
		if strings.Contains(s.text(), query) {
			t.Errorf("the terminal was asked %q", query)
		}
	}
	s.see("DEMONSTRATION", 3*time.Second)
	s.see("1/56", 5*time.Second)
	s.press("jjj")
	s.see("4/56", 5*time.Second)
	s.press("q")
	if status := s.gone(5 * time.Second); status != exitDone {
		t.Errorf("exit status %d after q", status)
	}
	s.see("[?1049l", time.Second)
	if !restored(t, s.tty) {
		t.Error("the terminal is left raw")
	}
}

// Signals end the program with 128 and their number, the terminal restored.
func TestSignals(t *testing.T) {
	for _, sig := range []syscall.Signal{syscall.SIGHUP, syscall.SIGTERM, syscall.SIGINT} {
		s := open(t, atNight)
		s.see("1/56", 5*time.Second)
		s.cmd.Process.Signal(sig)
		if status := s.gone(10 * time.Second); status != 128+int(sig) {
			t.Errorf("%v: exit status %d", sig, status)
		}
		if !restored(t, s.tty) {
			t.Errorf("%v: the terminal is left raw", sig)
		}
		s.see("[?1049l", time.Second)
	}
}

// A terminal that takes no more bytes does not hold the program up when it is
// told to end: within 10 s it is gone, by force if need be.
func TestStalledTerminal(t *testing.T) {
	for _, sig := range []syscall.Signal{syscall.SIGTERM, syscall.SIGHUP} {
		s := open(t, []string{"--tick", "1s", "--lat", "-29", "--lon", "-70"})
		s.see("1/256", 8*time.Second)
		s.stall.Store(true)
		for range 60 { // more frames than the buffers of a terminal hold
			s.tty.WriteString("G")
			time.Sleep(20 * time.Millisecond)
			s.tty.WriteString("g")
			time.Sleep(20 * time.Millisecond)
		}
		began := time.Now()
		s.cmd.Process.Signal(sig)
		if status := s.gone(10 * time.Second); status != 128+int(sig) {
			t.Errorf("%v: exit status %d", sig, status)
		}
		t.Logf("%v: gone after %v", sig, time.Since(began).Round(10*time.Millisecond))
		s.stall.Store(false)
		if !restored(t, s.tty) {
			t.Errorf("%v: the terminal is left raw", sig)
		}
	}
}

// When its terminal is gone the program ends, also where SIGHUP is ignored.
func TestOrphan(t *testing.T) {
	bin := built(t)
	for _, ignored := range []bool{false, true} {
		pidFile := filepath.Join(t.TempDir(), "pid")
		shell := "echo $$ >" + pidFile + "; exec " + bin + " --at 2026-12-03T03:00:00Z"
		if ignored {
			shell = "trap '' HUP; " + shell
		}
		x := inTmux(t, shell)
		x.see("1/56")
		text, err := os.ReadFile(pidFile)
		if err != nil {
			t.Fatal(err)
		}
		pid, err := strconv.Atoi(strings.TrimSpace(string(text)))
		if err != nil {
			t.Fatal(err)
		}
		began := time.Now()
		x.kill()
		for syscall.Kill(pid, 0) == nil {
			if time.Since(began) > 10*time.Second {
				syscall.Kill(pid, syscall.SIGKILL)
				t.Fatalf("SIGHUP ignored %v: still there after 10 s without a terminal", ignored)
			}
			time.Sleep(10 * time.Millisecond)
		}
		t.Logf("SIGHUP ignored %v: gone after %v", ignored, time.Since(began).Round(10*time.Millisecond))
	}
}

// ctrl+z, and a stop from outside, hand the terminal to the shell and take it
// back whole.
func TestSuspend(t *testing.T) {
	bin := built(t)
	for _, how := range []string{"key", "signal"} {
		x := inTmux(t, "PS1='shell> ' exec sh -i")
		x.see("shell>")
		x.run("send-keys", "-t", "s", bin+" --at 2026-12-03T03:00:00Z", "Enter")
		x.see("1/56")
		if how == "key" {
			x.run("send-keys", "-t", "s", "C-z")
		} else {
			exec.Command("pkill", "-TSTP", "-f", "^"+bin).Run()
		}
		x.see("Stopped")
		x.run("send-keys", "-t", "s", "echo in the $((1+1))nd shell", "Enter")
		x.see("in the 2nd shell")
		x.run("send-keys", "-t", "s", "fg", "Enter")
		x.see("1/56")
		x.run("send-keys", "-t", "s", "jj")
		x.see("3/56")
		x.run("send-keys", "-t", "s", "q")
		x.see("in the 2nd shell")
		x.kill()
	}
	// without a shell there is nothing to suspend to, and nothing hangs
	s := open(t, atNight)
	s.see("1/56", 5*time.Second)
	s.press("\x1a")
	s.see("not suspended", 5*time.Second)
	s.press("jj")
	s.see("3/56", 5*time.Second)
	s.press("q")
	if status := s.gone(5 * time.Second); status != exitDone {
		t.Errorf("exit status %d", status)
	}
}

// The hand-over lines go to the clipboard by the terminal's own request.
func TestClipboard(t *testing.T) {
	s := open(t, atNight)
	s.see("1/56", 5*time.Second)
	s.press("c")
	s.see("\x1b]52;c;", 5*time.Second)
	s.see("sent to the clipboard", 5*time.Second)
}

// In a dumb terminal the list is printed; bad settings are refused.
func TestSettings(t *testing.T) {
	s := open(t, atNight, "TERM=dumb")
	s.see("brighter end first", 10*time.Second) // the end of the legend
	if status := s.gone(10 * time.Second); status != exitDone || strings.Contains(s.text(), "\x1b[") {
		t.Errorf("TERM=dumb: status %d, %q", status, s.text())
	}
	for _, args := range [][]string{{"--theme", "blue"}, {"--glyphs", "big"}, {"--tick", "2s"}} {
		s := open(t, args)
		s.see("use one of", 10*time.Second)
		if status := s.gone(10 * time.Second); status != exitUsage {
			t.Errorf("%v: status %d, %q", args, status, s.text())
		}
	}
	s = open(t, append([]string{"--theme", "red"}, atNight...), "NO_COLOR=1")
	s.see("1/56", 5*time.Second)
	if strings.Contains(s.text(), "38;5") {
		t.Error("colours with NO_COLOR")
	}
	s.press("v")
	s.see("theme plain", 5*time.Second)
}

// inside is a program in a tmux of its own.
type inside struct {
	t            *testing.T
	tmux, socket string
}

var tmuxes atomic.Int32

func inTmux(t *testing.T, shell string) *inside {
	t.Helper()
	tmux, err := exec.LookPath("tmux")
	if err != nil {
		t.Skip("no tmux on this machine")
	}
	x := &inside{t, tmux, fmt.Sprintf("evenfall-test-%d-%d", os.Getpid(), tmuxes.Add(1))}
	t.Cleanup(x.kill)
	x.run("new-session", "-d", "-s", "s", "-x", "80", "-y", "24", "cd '"+t.TempDir()+"'; export LANG=C.UTF-8 TERM=screen-256color; "+shell)
	return x
}

func (x *inside) run(args ...string) string {
	x.t.Helper()
	out, err := exec.Command(x.tmux, append([]string{"-L", x.socket, "-f", "/dev/null"}, args...)...).CombinedOutput()
	if err != nil {
		x.t.Fatalf("tmux %v: %v\n%s", args, err, out)
	}
	return string(out)
}

func (x *inside) see(what string) {
	x.t.Helper()
	var all string
	for range 500 {
		if all = x.run("capture-pane", "-p", "-t", "s"); strings.Contains(all, what) {
			return
		}
		time.Sleep(10 * time.Millisecond)
	}
	x.t.Fatalf("no %q within 5 s:\n%s", what, all)
}

func (x *inside) kill() { exec.Command(x.tmux, "-L", x.socket, "kill-server").Run() }

// Inside tmux the program draws, moves, and hands text to tmux.
func TestTmux(t *testing.T) {
	x := inTmux(t, built(t)+" --at 2026-12-03T03:00:00Z; sleep 60")
	x.see("1/56")
	x.run("send-keys", "-t", "s", "jjj")
	x.see("4/56")
	x.run("send-keys", "-t", "s", "Enter")
	x.see("take|")
	x.run("send-keys", "-t", "s", "c")
	x.see("through tmux")
	if buffer := x.run("show-buffer"); !strings.Contains(buffer, "ICRS") {
		t.Errorf("tmux holds %q", buffer)
	}
}
