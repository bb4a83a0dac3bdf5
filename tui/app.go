// Package tui runs the screens in a terminal: it maps Bubble Tea's messages to
// keys and results, paces what is drawn to the link, and ends the program
// decently whatever happens to the terminal. It computes nothing about the sky.
package tui

import (
	"fmt"
	"io"
	"os"
	"runtime/debug"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"evenfall/astro/clock"
	"evenfall/tui/desk"
	"evenfall/tui/kit"
	"evenfall/tui/term"
)

// Options is what the program in a terminal needs.
type Options struct {
	Source  desk.Source
	Clock   clock.Clock
	In, Out *os.File
	Tick    time.Duration // how often the clock is shown anew; 0: only with keys
	Crash   term.CrashLog
	Getenv  func(string) string
	Save    func()           // brings everything precious to the disk
	Exit    func(status int) // ends the process, where nothing else does
}

// Open shows the screens until the user leaves.
//
// Returns:
//   - term.Signalled where a signal or the loss of the terminal ended it.
func Open(o Options) error {
	p := &pace{now: o.Clock.Now}
	out := output{o.Out, p}
	o.Source.Copy = term.Copier{Getenv: o.Getenv, Out: o.Out}.Copy
	m := newModel(o, p)
	program := tea.NewProgram(m, tea.WithAltScreen(), tea.WithInput(o.In), tea.WithOutput(out), tea.WithoutSignalHandler(),
		tea.WithFilter(func(_ tea.Model, msg tea.Msg) tea.Msg { return acknowledged(msg) }))
	guard := term.Watch(term.Guarded{
		Terminal: o.In, Save: o.Save, Kill: program.Kill, Exit: o.Exit,
		Release: func() { program.ReleaseTerminal() },
		Retake: func() {
			program.RestoreTerminal()
			program.Send(retaken{})
		},
		Say: func(text string) { program.Send(finished{kit.Say{Text: text}}) },
	})
	m.suspend = guard.Suspend
	_, err := program.Run()
	if ended := guard.Stop(); ended != nil {
		return ended
	}
	return err
}

// The messages of our own.
type (
	tick     struct{}
	beat     struct{} // a second has passed
	ack      struct{}
	retaken  struct{}         // the terminal is ours again
	settle   struct{}         // the size has settled
	escape   struct{ of int } // a held Escape was one
	lookover struct{}         // at a frame in flight
	finished struct{ of any } // what a task brought back
)

// unknownCSI is the type by which Bubble Tea reports a code that it does not
// know, such as the terminal's answer to a request for its status. The type is
// not exported, and the bytes in it belong to a buffer that is being read into
// again: so the type alone decides. Any other code of that kind would do no
// more than let one frame go early.
const unknownCSI = "tea.unknownCSISequenceMsg"

// acknowledged turns the terminal's answer into a message of our own.
func acknowledged(msg tea.Msg) tea.Msg {
	switch msg.(type) {
	case tea.KeyMsg, tick, beat, ack, finished, settle, escape, lookover, retaken, tea.WindowSizeMsg:
		return msg
	}
	if fmt.Sprintf("%T", msg) == unknownCSI {
		return ack{}
	}
	return msg
}

// model is the desk as Bubble Tea sees it.
type model struct {
	o        Options
	desk     *desk.Desk
	pace     *pace
	join     *joiner
	start    []desk.Task
	size     tea.WindowSizeMsg
	settling bool
	looking  bool
	suspend  func()
	broken   string // why the screen could not be drawn
}

func newModel(o Options, p *pace) *model {
	m := &model{o: o, pace: p, join: &joiner{}}
	m.desk, m.start = desk.New(o.Source, o.Clock.Now())
	return m
}

// Init starts the clock and the first list.
func (m *model) Init() tea.Cmd { return tea.Batch(m.commands(m.start), m.nextTick(), m.nextBeat()) }

// nextBeat waits for the next second where the screen goes on more seldom.
func (m *model) nextBeat() tea.Cmd {
	if m.o.Tick > 0 && m.o.Tick <= time.Second {
		return nil
	}
	return tea.Every(time.Second, func(time.Time) tea.Msg { return beat{} })
}

func (m *model) nextTick() tea.Cmd {
	if m.o.Tick <= 0 {
		return nil
	}
	return tea.Every(m.o.Tick, func(time.Time) tea.Msg { return tick{} })
}

// commands makes Bubble Tea's commands of tasks. A task that panics is written
// to the crash log and said on the screen; the program goes on.
func (m *model) commands(tasks []desk.Task) tea.Cmd {
	var list []tea.Cmd
	for _, t := range tasks {
		list = append(list, func() (msg tea.Msg) {
			defer func() {
				if p := recover(); p != nil {
					msg = finished{kit.Say{Text: t.Name + ": " + m.o.Crash.Write(m.o.Clock.Now(), p, debug.Stack()), Bad: true}}
				}
			}()
			return finished{t.Run()}
		})
	}
	return tea.Batch(list...)
}

// ring rings the terminal's bell where there is something to ring for.
func (m *model) ring() tea.Cmd {
	if !m.desk.Rings() {
		return nil
	}
	out := m.o.Out
	return func() tea.Msg {
		io.WriteString(out, "\a")
		return nil
	}
}

// settleAfter is how long sizes are gathered before the screen is laid out
// anew: each resize repaints everything.
const settleAfter = 50 * time.Millisecond

// escapeAfter is how long an Escape waits for the rest of an arrow's code.
const escapeAfter = 100 * time.Millisecond

// Update obeys one message.
func (m *model) Update(msg tea.Msg) (_ tea.Model, cmd tea.Cmd) {
	defer func() {
		if p := recover(); p != nil {
			text := m.o.Crash.Write(m.o.Clock.Now(), p, debug.Stack())
			m.desk.Apply(kit.Say{Text: "that failed: " + text, Bad: true})
		}
		if m.desk.Done() {
			cmd = tea.Quit
		} else if m.pace.waiting() && !m.looking {
			m.looking = true
			cmd = tea.Batch(cmd, tea.Tick(patience, func(time.Time) tea.Msg { return lookover{} }))
		}
	}()
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		first := m.size.Width == 0 && !m.settling
		m.size = msg
		if first {
			return m, m.commands(m.desk.Resize(msg.Width, msg.Height))
		}
		if !m.settling {
			m.settling = true
			return m, tea.Tick(settleAfter, func(time.Time) tea.Msg { return settle{} })
		}
	case settle:
		m.settling = false
		return m, m.commands(m.desk.Resize(m.size.Width, m.size.Height))
	case tick:
		return m, tea.Batch(m.commands(m.desk.Tick(m.o.Clock.Now())), m.nextTick(), m.ring())
	case beat:
		return m, tea.Batch(m.commands(m.desk.Beat(m.o.Clock.Now())), m.nextBeat(), m.ring())
	case ack:
		m.pace.arrived()
	case lookover:
		m.looking = false
	case finished:
		return m, m.commands(m.desk.Apply(msg.of))
	case escape:
		if msg.of == m.join.timer {
			return m, m.obey(m.join.release())
		}
	case retaken:
		m.pace.arrived() // what was in flight went to the shell
		return m, tea.ClearScreen
	case tea.KeyMsg:
		return m, m.key(msg)
	}
	return m, nil
}

func (m *model) key(msg tea.KeyMsg) tea.Cmd {
	switch {
	case msg.Paste:
		return m.commands(m.desk.Paste(string(msg.Runes)))
	case msg.Type == tea.KeyCtrlZ && m.suspend != nil:
		return func() tea.Msg { m.suspend(); return nil }
	}
	keys, wait := m.join.keys(msg)
	cmd := m.obey(keys)
	if !wait {
		return cmd
	}
	of := m.join.timer
	return tea.Batch(cmd, tea.Tick(escapeAfter, func(time.Time) tea.Msg { return escape{of} }))
}

func (m *model) obey(keys []string) tea.Cmd {
	var tasks []desk.Task
	m.desk.Clock(m.o.Clock.Now())
	for _, k := range keys {
		if k == answer {
			m.pace.arrived()
			continue
		}
		tasks = append(tasks, m.desk.Key(k)...)
	}
	return m.commands(tasks)
}

// View draws the screen, unless the last frame is still on its way.
func (m *model) View() string {
	return m.pace.frame(func() (s string) {
		defer func() {
			if p := recover(); p != nil {
				if m.broken == "" {
					m.broken = m.o.Crash.Write(m.o.Clock.Now(), p, debug.Stack())
				}
				s = "this screen cannot be drawn: " + m.broken + "\nesc goes back, q leaves"
			}
		}()
		return m.desk.View()
	})
}
