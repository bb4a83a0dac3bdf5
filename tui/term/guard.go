// Package term is the terminal and the process as the system sees them:
// signals, the terminal's mode, whether there still is a terminal, the
// clipboard, the crash log. It knows nothing of what is on the screen.
package term

import (
	"fmt"
	"os"
	"os/signal"
	"sync"
	"sync/atomic"
	"syscall"
	"time"

	xterm "github.com/charmbracelet/x/term"
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
	// Suspend and Retake hand the terminal to the shell and take it back.
	Suspend, Retake func()
	// Exit ends the process.
	Exit func(status int)
}

// Times of the guard.
const (
	forceAfter  = 2 * time.Second // from the wish to end to the end by force
	orphanEvery = 5 * time.Second // between looks at whether there is a terminal
)

// Guard sees to it that the process ends when it is told to or its terminal
// is gone, whatever is stalled, and that the terminal's mode is restored.
type Guard struct {
	g         Guarded
	mode      *xterm.State
	signals   chan os.Signal
	stop      chan struct{}
	ended     atomic.Int32 // the signal; 0 none
	suspended atomic.Bool
	once      sync.Once
}

// Watch starts a guard. The terminal's mode as it is now is what it will put
// back.
func Watch(g Guarded) *Guard {
	w := &Guard{g: g, signals: make(chan os.Signal, 8), stop: make(chan struct{})}
	if mode, err := xterm.GetState(g.Terminal.Fd()); err == nil {
		w.mode = mode
	}
	signal.Notify(w.signals, syscall.SIGHUP, syscall.SIGTERM, syscall.SIGINT, syscall.SIGTSTP, syscall.SIGCONT)
	go w.listen()
	return w
}

func (w *Guard) listen() {
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
				go w.g.Suspend()
			case syscall.SIGCONT:
				if !w.suspended.Load() {
					go w.g.Retake()
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

// Suspending is to be called right before the process stops itself, so that
// the signal stops it.
func (w *Guard) Suspending() {
	w.suspended.Store(true)
	signal.Reset(syscall.SIGTSTP)
}

// Resumed is to be called once it runs again.
func (w *Guard) Resumed() {
	w.suspended.Store(false)
	signal.Notify(w.signals, syscall.SIGTSTP)
}

// Stop ends the guard; it returns how the session was ended, nil where the
// program ended by itself.
func (w *Guard) Stop() error {
	signal.Stop(w.signals)
	close(w.stop)
	if n := w.ended.Load(); n != 0 {
		w.restore()
		return Signalled{int(n)}
	}
	return nil
}
