// Package kit is what the screens share: what a screen is, the world it is
// shown, the table of keys, looks and themes, a pen for lines, a canvas, and
// the words for figures. It knows no Bubble Tea, touches no terminal and reads
// no clock.
package kit

import (
	"context"
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/light"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
)

// World is what a screen is shown: values that do not change under it.
type World struct {
	Look     *Look
	Site     astro.Site
	Title    string // of the run
	Demo     bool
	Zone     *time.Location
	Wall     time.Time // what the clock says, UTC
	Shown    time.Time // the moment shown, UTC; the same as Wall when Live
	Live     bool      // the moment shown goes on with the clock
	Fixed    bool      // the clock itself was stopped by --at
	Snap     *roster.Snapshot
	Selected int          // place in the roster; -1: none
	Place    int          // place of the selected target in the order shown; -1: not in it
	Marks    map[int]bool // by place in the roster
	Filter   string       // as typed
	Sort     roster.Sort
	OrderAt  time.Time // when the order shown was made
	HandOver moment.HandOver
	Band     targets.Band
	Level    float64
	Width    int
	Height   int // of the whole screen
	// of the log
	Book       *logbook.Book     // nil: none
	Observer   string            // "": not asked yet
	Requests   []targets.Request // of the run
	Take       *logbook.Take     // under way in this session
	Others     []logbook.Take    // under way in others
	Conditions logbook.Conditions
	Limits     targets.Limits
	Changed    int      // counts what was written to the log
	Pending    []string // what the disk has not taken yet
	Silent     bool     // no bell
	ClockWords string   // whether the clock is kept right

	// Night prepares a night; asked in tasks.
	Night func(astro.Date) (*moment.Night, error)
	// Field lists the neighbours of the run's targets; nil: none are.
	Field func() []targets.Target
	// Lights is where forecasts and dates come from; nil: the targets' own.
	Lights Lights
	// Coming is what the selected target does next, from the moment shown on.
	Coming []light.Event

	Lives Lives // judgements and lines of lives, for the diagram; nil: the roster's own
	Ticks bool  // the clock goes on by itself, not only with keys
}

// Entry returns the selected target; nil: there is none.
func (w *World) Entry() *roster.Entry {
	if w.Snap == nil || w.Selected < 0 || w.Selected >= w.Snap.Roster.Len() {
		return nil
	}
	return w.Snap.Roster.Entry(w.Selected)
}

// Moment returns the selected target's moment where it has been worked out.
func (w *World) Moment() *moment.Moment {
	if w.Entry() == nil {
		return nil
	}
	return w.Snap.Peek(w.Selected)
}

// Body is how many lines a screen has for itself: all but the status line and
// the footer.
func (w *World) Body() int { return max(w.Height-StatusLines, 0) }

// Warnings says which limits of the site the conditions break.
func (w *World) Warnings() []string { return w.Conditions.Warnings(&w.Limits) }

// StatusLines is how many lines below a screen are not its own: the loop at
// the telescope, the status line and the footer.
const StatusLines = 3

// Screen is one screen. It is a value: Key and Apply return what it becomes.
type Screen interface {
	// Title names it, as in the table of keys.
	Title() string
	// Typing tells whether keys are text now.
	Typing() bool
	// Key obeys a key; a Job is what is asked of the program, or nil.
	Key(w *World, press string) (Screen, Job)
	// Apply takes what a Work brought back.
	Apply(w *World, r Result) Screen
	// View draws it into width columns and height lines.
	View(w *World, width, height int) string
	// Prompt writes what the status line says instead of its own text; false:
	// nothing.
	Prompt(w *World, p *Pen) bool
}

// Paster is a screen that takes pasted text.
type Paster interface {
	Paste(w *World, text string) (Screen, Job)
}

// Shows is a screen that names the rows it is showing, so that those of long
// lists are worked out.
type Shows interface {
	Rows(w *World) []int32
}

// Rests is a screen that does some work only once the user rests on a star: it
// is refreshed each second too.
type Rests interface{ Rests() }

// Holder is a screen that may hold something half typed.
type Holder interface{ HalfTyped() bool }

// Kept is a holder whose text can be kept and recalled.
type Kept interface {
	Holder
	Title() string
	Draft() string
	Recall(draft string) Screen
}

// PasteWhere says what pasted text is for.
const PasteWhere = "pasted text is for fields: a adds a target, / filters"

// Job is what a key asks of the program beyond its own screen.
type Job any

// The jobs.
type (
	// All is several jobs.
	All []Job
	// Work is done in the background; the screen's Apply gets the result.
	Work struct {
		Name string
		Run  func(ctx context.Context) (Result, error)
	}
	// Select moves the selection to a target.
	Select struct{ Row int }
	// Find filters and orders the list.
	Find struct {
		Filter string
		Sort   roster.Sort
	}
	// Rerank puts the list into the order that holds now.
	Rerank struct{}
	// Toggle marks or unmarks the selected target.
	Toggle struct{}
	// Step changes the moment shown.
	Step struct {
		By     time.Duration
		Nights int
	}
	// Now goes back to the clock.
	Now struct{}
	// Open opens a screen by its title.
	Open struct{ Screen string }
	// Close goes back to the screen before.
	Close struct{}
	// Add takes a new target into the list.
	Add struct{ Entry roster.Entry }
	// Weather writes conditions.
	Weather struct{ Conditions logbook.Conditions }
	// Amend grades an entry, or declares it void.
	Amend struct {
		Entry int64
		Grade string
		Void  bool
	}
	// Copy sends text to the clipboard.
	Copy struct{ Text string }
	// Say puts a message on the status line.
	Say struct {
		Text string
		Bad  bool // stays until dismissed
	}
)

// Result is what a Work brings back.
type Result any

// Failed is the result of a Work that failed or broke off.
type Failed struct {
	Name string
	Err  error
}
