// Package term is the terminal and the process as the system sees them:
// signals, the terminal's mode, whether there still is a terminal, the
// clipboard, the crash log. It knows nothing of what is on the screen.
package term

import (
	"bytes"
	"fmt"
	"os"
	"os/signal"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"time"

	xterm "github.com/charmbracelet/x/term"
	"golang.org/x/sys/unix"
)

// Signalled is how a session ended that a signal, or the loss of its
// terminal, ended.
type Signalled struct{ Number int }

// Error says which signal.
func (s Signalled) Error() string {
	return fmt.Sprintf("ended by signal %d (%s)", s.Number, syscall.Signal(s.Number))
}

// Status is the exit status that goes with it, by custom.
func (s Signalled) Status() int { return 128 + s.Number }

// Guarded is what a guard acts on.
type Guarded struct {
	Terminal *os.File
	// Save brings everything precious to the disk. It must not wait for
	// whoever draws the screen.
	Save func()
	// Kill asks the program to end; it may never return.
	Kill func()
	// Release and Retake hand the terminal to the shell and take it back.
	Release, Retake func()
	// Say puts a message on the screen; it may wait for whoever draws it.
	Say func(text string)
	// Exit ends the process.
	Exit func(status int)
}

// Times of the guard.
const (
	forceAfter  = 2 * time.Second        // from the wish to end to the end by force
	orphanEvery = 5 * time.Second        // between looks at whether there is a terminal
	stopsWithin = 100 * time.Millisecond // a signal that stops the process has done so
)

// Guard sees to it that the process ends when it is told to or its terminal
// is gone, whatever is stalled, and that the terminal's mode is restored.
type Guard struct {
	g         Guarded
	mode      *xterm.State
	signals   chan os.Signal
	stop      chan struct{}
	stopped   chan struct{} // closed when nobody listens any more
	ended     atomic.Int32  // the signal; 0 none
	suspended atomic.Bool
	once      sync.Once
}

// Watch starts a guard. The terminal's mode as it is now is what it will put
// back.
func Watch(g Guarded) *Guard {
	w := &Guard{g: g, signals: make(chan os.Signal, 8), stop: make(chan struct{}), stopped: make(chan struct{})}
	if mode, err := xterm.GetState(g.Terminal.Fd()); err == nil {
		w.mode = mode
	}
	signal.Notify(w.signals, syscall.SIGHUP, syscall.SIGTERM, syscall.SIGINT, syscall.SIGTSTP, syscall.SIGCONT)
	go w.listen()
	return w
}

func (w *Guard) listen() {
	defer close(w.stopped)
	orphan := time.NewTicker(orphanEvery)
	defer orphan.Stop()
	for {
		select {
		case <-w.stop:
			return
		case <-orphan.C:
			if _, _, err := xterm.GetSize(w.g.Terminal.Fd()); err != nil {
				w.end(syscall.SIGHUP)
			}
		case s := <-w.signals:
			switch s {
			case syscall.SIGTSTP:
				go w.Suspend()
			case syscall.SIGCONT:
				if !w.suspended.Load() {
					go func() { w.g.Release(); w.g.Retake() }()
				}
			default:
				w.end(s.(syscall.Signal))
			}
		}
	}
}

// end saves, asks the program to end, and ends it by force if it does not.
func (w *Guard) end(s syscall.Signal) {
	w.once.Do(func() {
		w.ended.Store(int32(s))
		go func() {
			force := time.AfterFunc(forceAfter, func() {
				w.restore()
				w.g.Exit(128 + int(s))
			})
			defer force.Stop()
			w.g.Save()
			w.g.Kill()
			// Kill returned: the program ends by itself, or force does it
			<-w.stop
		}()
	})
}

// restore puts the terminal's mode back; an ioctl, which no stalled output
// holds up.
func (w *Guard) restore() {
	if w.mode != nil {
		xterm.SetState(w.g.Terminal.Fd(), w.mode)
	}
}

// Suspend hands the terminal to the shell, stops the process and its job, and
// takes the terminal back once the shell lets them go on. Where there is no
// shell to go back to it says so: nothing would ever wake the process.
//
// Notes:
//  1. The job is stopped by SIGSTOP: once SIGTSTP has been caught, Go's runtime
//     keeps its handler, which ignores it.
func (w *Guard) Suspend() {
	if orphaned() {
		w.g.Say("not suspended: no shell is waiting for the terminal")
		return
	}
	if !w.suspended.CompareAndSwap(false, true) {
		return
	}
	defer w.suspended.Store(false)
	w.g.Release()
	syscall.Kill(0, syscall.SIGSTOP)
	time.Sleep(stopsWithin) // it stops in here
	w.g.Retake()
}

// orphaned tells whether the process's job has no shell above it: no ancestor
// of the same session outside the job.
//
// Source: POSIX.1-2017, 3.264 Orphaned Process Group.
func orphaned() bool {
	job := syscall.Getpgrp()
	session, err := unix.Getsid(0)
	if err != nil {
		return false
	}
	for pid := syscall.Getppid(); pid > 1; {
		if s, err := unix.Getsid(pid); err != nil || s != session {
			return true
		}
		if g, err := syscall.Getpgid(pid); err != nil || g != job {
			return err != nil
		}
		if pid = parent(pid); pid == 0 {
			return false
		}
	}
	return true
}

// parent returns the parent of a process; 0: the system does not say.
func parent(pid int) int {
	text, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", pid))
	if err != nil {
		return 0
	}
	// pid (name) state parent ...; a name may hold anything
	_, rest, _ := strings.Cut(string(text[bytes.LastIndexByte(text, ')')+1:]), " ")
	var state string
	var up int
	if _, err := fmt.Sscan(rest, &state, &up); err != nil {
		return 0
	}
	return up
}

// Stop ends the guard; it returns how the session was ended, nil where the
// program ended by itself.
func (w *Guard) Stop() error {
	signal.Stop(w.signals)
	close(w.stop)
	<-w.stopped
	if n := w.ended.Load(); n != 0 {
		w.restore()
		return Signalled{int(n)}
	}
	return nil
}
