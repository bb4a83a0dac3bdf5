package tui

import (
	"os"
	"sync"
	"time"
)

// pace keeps one frame in flight. Nothing tells a program that its link is
// slow: minutes of stale frames can pile up in buffers. So each frame ends
// with a request for the terminal's status, and while that is unanswered no
// other frame is drawn; the state goes on meanwhile.
//
// Source: ECMA-48, DSR; the answer to CSI 5 n is CSI 0 n.
type pace struct {
	now func() time.Time

	mu       sync.Mutex
	last     string
	tag      bool // the next write is a frame that asks
	flying   bool // a frame is unanswered
	sent     time.Time
	answered bool // the terminal has answered once: only then frames wait
	misses   int
	off      bool
}

const (
	statusRequest = "\x1b[5n"
	patience      = 8 * time.Second // for an answer, then a frame is drawn all the same
	missesAllowed = 2               // in a row, then pacing is off for the session
)

// frame returns the picture to draw: the last one again while it is in
// flight.
func (p *pace) frame(draw func() string) string {
	p.mu.Lock()
	if p.flying && p.now().Sub(p.sent) >= patience {
		p.flying = false
		p.misses++
		if p.misses >= missesAllowed || !p.answered {
			p.off = true
		}
	}
	if p.flying && p.answered {
		defer p.mu.Unlock()
		return p.last
	}
	p.mu.Unlock()
	s := draw()
	p.mu.Lock()
	defer p.mu.Unlock()
	if s != p.last {
		p.last = s
		p.tag = !p.off && !p.flying
	}
	return s
}

// waiting tells whether a frame is in flight.
func (p *pace) waiting() bool {
	p.mu.Lock()
	defer p.mu.Unlock()
	return p.flying
}

// arrived takes the terminal's answer.
func (p *pace) arrived() {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.flying, p.answered, p.misses = false, true, 0
}

// asks tells whether what is written now is a frame that shall ask.
func (p *pace) asks() bool {
	p.mu.Lock()
	defer p.mu.Unlock()
	if !p.tag {
		return false
	}
	p.tag, p.flying, p.sent = false, true, p.now()
	return true
}

// output is the terminal as Bubble Tea is given it: still a file, so that it
// finds the terminal and its size.
type output struct {
	*os.File
	pace *pace
}

// Write sends what is written, a frame with its request in one write. No lock
// is held meanwhile: a stalled terminal stops nothing else.
func (o output) Write(b []byte) (int, error) {
	if !o.pace.asks() {
		return o.File.Write(b)
	}
	asked := make([]byte, 0, len(b)+len(statusRequest))
	asked = append(append(asked, b...), statusRequest...)
	n, err := o.File.Write(asked)
	return min(n, len(b)), err
}
