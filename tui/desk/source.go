package desk

import (
	"time"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/logbook"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/kit"
)

// Source is what the desk is opened on.
type Source struct {
	Site     astro.Site
	Title    string
	Demo     bool
	Zone     *time.Location
	HandOver moment.HandOver
	Band     targets.Band
	Level    float64
	Roster   *roster.Roster
	// Night prepares a night; called from tasks, several at a time.
	Night func(astro.Date) (*moment.Night, error)
	// Copy sends text to the clipboard and says where it went; called from a
	// task.
	Copy func(text string) (string, error)
	// Fixed: the clock stands still.
	Fixed bool
	// Start is a moment of one's own to begin with; zero: the clock's.
	Start time.Time
	// Every is how often the list follows the clock; 0: only when asked.
	Every time.Duration
	// Book is the run's log; nil: none.
	Book *logbook.Book
	// Session names this session, the same again after a dropped link.
	Session string
	// PID is the process, by which another login sees whether it lives; Alive
	// tells whether one does.
	PID   int
	Alive func(pid int) bool
	// Observer is who observes, if it is known.
	Observer string
	// Requests are the run's; Request returns the one that a target is taken
	// for.
	Requests []targets.Request
	Request  func(target string) (targets.Request, bool)
	// Field lists the neighbours of the run's targets; called from tasks. nil:
	// none are listed.
	Field func() []targets.Target
	// Readout returns the time between frames of an instrument, seconds; nil: 0.
	Readout func(instrument string) float64
	// Changed tells that other conditions hold; nights made from then on are
	// to heed them.
	Changed func(targets.Conditions)
	Limits  targets.Limits
	// ClockWords says whether the clock is kept right.
	ClockWords string
	// State is what an earlier session left, as State wrote it, and Former its
	// name, under which its drafts are.
	State, Former string
	// Notices are said once, at the start.
	Notices []string
	Look    *kit.Look
	// Lights is where forecasts over time and dates come from; nil: the
	// targets' own.
	Lights kit.Lights
	// Lives is where the diagram has its figures from; nil: the roster's own
	// judgement.
	Lives kit.Lives
}

// Task is work for the background. What Run returns goes to Apply.
type Task struct {
	Name string
	Run  func() any
}
