//go:build unix

package tui

import (
	"context"
	"fmt"
	"os"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/vt"
	"github.com/creack/pty"

	"evenfall/tui/check"
	"evenfall/tui/desk"
	"evenfall/tui/kit"
	"evenfall/tui/term"
)

// quick is a clock that goes on as many times faster than time.
type quick struct {
	began time.Time
	times int
}

func (q quick) Now() time.Time {
	return check.Start.Add(time.Duration(q.times) * time.Since(q.began))
}

// emulator is a terminal that one goroutine writes to and another reads off.
type emulator struct {
	*vt.Emulator
	mu sync.Mutex
}

func newEmulator(w, h int) *emulator { return &emulator{Emulator: vt.NewEmulator(w, h)} }

func (e *emulator) Write(b []byte) (int, error) {
	e.mu.Lock()
	defer e.mu.Unlock()
	return e.Emulator.Write(b)
}

// session is the program with its real loop and renderer on a terminal.
type session struct {
	t      *testing.T
	master *os.File
	emu    *emulator
	bytes  atomic.Int64
	frames atomic.Int64 // requests for the terminal's status
	mute   atomic.Bool  // the terminal answers nothing
	stall  atomic.Bool  // the terminal takes nothing
	ended  chan error
	w, h   int
}

func start(t *testing.T, src desk.Source, w, h, times int, mute bool) *session {
	t.Helper()
	master, tty, err := pty.Open()
	if err != nil {
		t.Fatal(err)
	}
	pty.Setsize(tty, &pty.Winsize{Rows: uint16(h), Cols: uint16(w)})
	s := &session{t: t, master: master, emu: newEmulator(w, h), ended: make(chan error, 1), w: w, h: h}
	s.mute.Store(mute)
	var answers sync.WaitGroup
	answers.Add(1)
	go func() { // what the terminal answers is typed
		defer answers.Done()
		buf := make([]byte, 256)
		for {
			n, err := s.emu.Read(buf)
			if err != nil {
				return
			}
			if !s.mute.Load() {
				master.Write(buf[:n])
			}
		}
	}()
	go func() {
		buf := make([]byte, 65536)
		for {
			for s.stall.Load() {
				time.Sleep(5 * time.Millisecond)
			}
			n, err := master.Read(buf)
			if err != nil {
				return
			}
			s.bytes.Add(int64(n))
			s.frames.Add(int64(strings.Count(string(buf[:n]), statusRequest)))
			s.emu.Write(buf[:n])
		}
	}()
	o := Options{Source: src, Clock: quick{time.Now(), times}, In: tty, Out: tty, Tick: time.Second / time.Duration(times),
		Crash:  term.CrashLog{Path: t.TempDir() + "/crash.log"},
		Getenv: func(string) string { return "" }, Save: func() {}, Exit: func(int) {}}
	go func() { s.ended <- Open(o) }()
	t.Cleanup(func() {
		master.WriteString("q")
		select {
		case <-s.ended:
		case <-time.After(5 * time.Second):
			t.Error("the program does not end")
		}
		master.Close()
		tty.Close()
	})
	return s
}

// see waits until the terminal shows a text.
func (s *session) see(what string) {
	s.t.Helper()
	var all string
	for range 1000 {
		if all = s.locked(); strings.Contains(all, what) {
			return
		}
		time.Sleep(10 * time.Millisecond)
	}
	s.t.Fatalf("no %q on the terminal:\n%s", what, all)
}

// locked reads the grid cell by cell.
func (s *session) locked() string {
	s.emu.mu.Lock()
	defer s.emu.mu.Unlock()
	g := check.Grid{Emulator: s.emu.Emulator, W: s.w, H: s.h}
	return g.Text()
}

func (s *session) press(keys string) { s.master.WriteString(keys) }

func source(t *testing.T, every int) desk.Source {
	src := check.Source(t, every)
	src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, kit.Braille)
	return src
}

// What the real renderer puts on a terminal is what the desk draws.
func TestRendererIsHonest(t *testing.T) {
	src := source(t, 8)
	src.Fixed = true
	s := start(t, src, 80, 24, 1, false)
	s.see("1/32")
	s.press("jjj")
	s.see("4/32")
	s.press("\r")
	s.see("take|")
	d := check.New(t, src, 80, 24)
	d.Press("j", "j", "j", "enter")
	want := strings.Split(d.Grid().Text(), "\n")
	s.see(strings.TrimSpace(want[len(want)-3])) // the last of the picture to come
	got := strings.Split(s.locked(), "\n")
	for y := range want {
		if y != 1 && strings.TrimRight(got[y], " ") != want[y] { // the clock went on
			t.Errorf("line %d: %q, wanted %q", y, got[y], want[y])
		}
	}
	s.press("qq")
	if err := <-s.ended; err != nil {
		t.Errorf("q ends it with %v", err)
	}
	s.ended <- nil
}

// Bytes at 80x24: a step of the cursor, a step where pages turn, and a second
// in which nothing happens.
func TestBytes(t *testing.T) {
	if testing.Short() {
		t.Skip("some seconds of the real loop; not with -short")
	}
	src := check.Equipped(t, 1)
	src.Look = source(t, 200).Look
	s := start(t, src, 80, 24, 10, false)
	s.see("1/256")
	settle := func(what string) {
		s.see(what)
		time.Sleep(60 * time.Millisecond)
	}
	settle("1/256")
	before := s.bytes.Load()
	began := time.Now()
	time.Sleep(9 * time.Second)
	idle := float64(s.bytes.Load()-before) / (10 * time.Since(began).Seconds())
	t.Logf("an idle second: %.0f bytes", idle)
	if idle > 150 {
		t.Errorf("an idle second takes %.0f bytes, at most 150", idle)
	}
	step := func(from, to int) float64 {
		before, began := s.bytes.Load(), time.Now()
		for n := from + 1; n <= to; n++ {
			s.press("j")
			settle(fmt.Sprintf("%d/256", n))
		}
		return (float64(s.bytes.Load()-before) - 10*idle*time.Since(began).Seconds()) / float64(to-from)
	}
	if down := step(1, 13); down > 450 {
		t.Errorf("a step of the cursor takes %.0f bytes, at most 450", down)
	} else {
		t.Logf("a step of the cursor: %.0f bytes", down)
	}
	if page := step(13, 13+66); page > 500 {
		t.Errorf("a step where pages turn takes %.0f bytes, at most 500", page)
	} else {
		t.Logf("a step with the pages it turns: %.0f bytes", page)
	}
}

// Ten keys of one write are ten keys, arrows in two pieces are arrows, and the
// terminal's answers are no keys, in one piece or two.
func TestKeys(t *testing.T) {
	src := source(t, 8)
	src.Fixed = true
	s := start(t, src, 80, 24, 1, false)
	s.see("1/32")
	s.press("jjjjjjjjjj")
	s.see("11/32")
	s.press("\x1b")
	s.press("[B")
	s.see("12/32")
	time.Sleep(200 * time.Millisecond)
	s.press("\x1b[0n\x1b[0n")
	s.press("\x1b[")
	time.Sleep(20 * time.Millisecond)
	s.press("0n")
	s.press("kk")
	s.see("10/32")
	if all := s.locked(); strings.Contains(all, "NOT NOW") {
		t.Errorf("an answer was obeyed as keys:\n%s", all)
	}
	s.press("\x1b[200~qqq\x1b[201~")
	s.see("pasted text is for fields")
}

func TestJoiner(t *testing.T) {
	esc := tea.KeyMsg{Type: tea.KeyEscape}
	runes := func(s string) tea.KeyMsg { return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(s)} }
	for _, c := range []struct {
		in   []tea.KeyMsg
		want string
	}{
		{[]tea.KeyMsg{runes("jjk")}, "j j k"},
		{[]tea.KeyMsg{esc, runes("[B")}, "down"},
		{[]tea.KeyMsg{esc, runes("["), runes("A")}, "up"},
		{[]tea.KeyMsg{{Type: tea.KeyRunes, Runes: []rune("["), Alt: true}, runes("6~j")}, "pgdown j"},
		{[]tea.KeyMsg{esc, runes("OD")}, "left"},
		{[]tea.KeyMsg{esc, runes("[0n")}, answer},
		{[]tea.KeyMsg{esc, runes("j")}, "esc j"},
		{[]tea.KeyMsg{esc, esc, runes("q")}, "esc esc q"},
		{[]tea.KeyMsg{esc, {Type: tea.KeyEnter}}, "esc enter"},
		{[]tea.KeyMsg{esc, runes("[1;5Cx")}, "x"},
		{[]tea.KeyMsg{{Type: tea.KeyRunes, Runes: []rune("m"), Alt: true}}, "esc m"},
	} {
		j := &joiner{}
		var got []string
		for _, k := range c.in {
			keys, _ := j.keys(k)
			got = append(got, keys...)
		}
		if j.held != "" {
			t.Errorf("%v leaves %q held", c.in, j.held)
		}
		if s := strings.Join(got, " "); s != c.want {
			t.Errorf("%v is %q, wanted %q", c.in, s, c.want)
		}
	}
	j := &joiner{}
	if _, wait := j.keys(esc); !wait {
		t.Error("an Escape is not held")
	}
	if k := j.release(); len(k) != 1 || k[0] != "esc" {
		t.Errorf("released: %v", k)
	}
}

// Other messages are no answers; that the answer is one is seen in
// TestPacing.
func TestAcknowledged(t *testing.T) {
	for _, msg := range []tea.Msg{tick{}, finished{1}, tea.WindowSizeMsg{}, tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("[0n")}, "text", tea.Quit()} {
		if _, ok := acknowledged(msg).(ack); ok {
			t.Errorf("%T is taken for the answer", msg)
		}
	}
}

// The terminal's answer is recognised as Bubble Tea reports it: frame after
// frame asks, and none waits for its patience to end.
func TestPacing(t *testing.T) {
	src := source(t, 8)
	src.Fixed = true
	s := start(t, src, 80, 24, 1, false)
	s.see("1/32")
	began := time.Now()
	for i := 2; i <= 20; i++ {
		s.press("j")
		s.see(fmt.Sprintf("%d/32", i))
	}
	if n := s.frames.Load(); n < 15 {
		t.Errorf("%d frames asked: the answers are not recognised", n)
	}
	if took := time.Since(began); took > patience {
		t.Errorf("19 keys took %v: answers are missed", took)
	}
}

// One frame is in flight: while the terminal is silent no other is drawn, the
// state goes on, and the last state is drawn when the answer comes. Without
// any answer frames are not held at all.
func TestPace(t *testing.T) {
	at := check.Start
	p := &pace{now: func() time.Time { return at }}
	draws := 0
	draw := func(s string) func() string { return func() string { draws++; return s } }
	send := func() bool { return p.asks() }
	if p.frame(draw("a")) != "a" || !send() {
		t.Error("the first frame does not ask")
	}
	if p.frame(draw("b")) != "b" || send() {
		t.Error("a terminal that has never answered is waited for, or asked twice")
	}
	p.arrived()
	if p.frame(draw("c")) != "c" || !send() {
		t.Error("a frame after the answer does not ask")
	}
	before := draws
	if p.frame(draw("d")) != "c" || draws != before || send() {
		t.Error("a second frame is drawn while one is in flight")
	}
	p.arrived()
	if p.frame(draw("e")) != "e" || !send() {
		t.Error("the frame after the answer is not drawn")
	}
	at = at.Add(patience + time.Second)
	if p.frame(draw("f")) != "f" || p.off || !send() {
		t.Error("after 8 s without an answer no frame comes, or pacing is off at once")
	}
	at = at.Add(patience + time.Second)
	if p.frame(draw("g")) != "g" || !p.off || send() {
		t.Error("after two answers missing pacing is not off")
	}
	q := &pace{now: func() time.Time { return at }}
	q.frame(draw("a"))
	q.asks()
	at = at.Add(patience)
	if q.frame(draw("b")); !q.off {
		t.Error("a terminal that never answers is asked for ever")
	}
}

// A terminal that answers nothing is not waited for.
func TestMute(t *testing.T) {
	src := source(t, 8)
	s := start(t, src, 80, 24, 1, true)
	s.see("1/32")
	for i := 2; i < 12; i++ {
		s.press("j")
		s.see(fmt.Sprintf("%d/32", i))
	}
	if n := s.frames.Load(); n != 1 {
		t.Errorf("a mute terminal was asked %d times", n)
	}
}

// While a frame is in flight keys count, and the picture that comes when the
// terminal takes bytes again is the last one.
func TestStall(t *testing.T) {
	src := source(t, 4)
	src.Fixed = true
	s := start(t, src, 80, 24, 1, false)
	s.see("1/64")
	s.press("j")
	s.see("2/64")
	time.Sleep(100 * time.Millisecond)
	s.stall.Store(true)
	time.Sleep(20 * time.Millisecond)
	before := s.frames.Load()
	for range 40 {
		s.press("j")
		time.Sleep(5 * time.Millisecond)
	}
	s.stall.Store(false)
	s.see("42/64")
	if n := s.frames.Load() - before; n > 4 {
		t.Errorf("%d frames for keys that came while the terminal was silent", n)
	}
}

// delayed delivers bytes in order, each piece after a while.
func delayed(by time.Duration, deliver func([]byte)) func([]byte) {
	type piece struct {
		due   time.Time
		bytes []byte
	}
	queue := make(chan piece, 1<<16)
	go func() {
		for p := range queue {
			time.Sleep(time.Until(p.due))
			deliver(p.bytes)
		}
	}()
	return func(b []byte) { queue <- piece{time.Now().Add(by), b} }
}

// Over a link of 1,200 bytes a second and 600 ms there and back, with room for
// any number of bytes on the way as sshd has it, j is held for 3 s at 30 a
// second: the screen is right within 4 s of its release.
func TestSlowLink(t *testing.T) {
	if testing.Short() {
		t.Skip("ten seconds of a slow link; not with -short")
	}
	took := slowLink(t)
	if took > 4*time.Second { // a machine that is busy with other things gets a second try
		took = slowLink(t)
	}
	if took > 4*time.Second {
		t.Errorf("the screen was right %v after the release, at most 4 s", took)
	}
}

func slowLink(t *testing.T) time.Duration {
	src := source(t, 1)
	src.Fixed = true
	master, tty, err := pty.Open()
	if err != nil {
		t.Fatal(err)
	}
	pty.Setsize(tty, &pty.Winsize{Rows: 24, Cols: 80})
	s := &session{t: t, master: master, emu: newEmulator(80, 24), ended: make(chan error, 1), w: 80, h: 24}
	const perSecond, oneWay = 1200, 300 * time.Millisecond
	down, up := delayed(oneWay, func(b []byte) { s.emu.Write(b) }), delayed(oneWay, func(b []byte) { master.Write(b) })
	way := make(chan byte, 1<<22)
	go func() {
		buf := make([]byte, 4096)
		for {
			n, err := master.Read(buf)
			if err != nil {
				close(way)
				return
			}
			for _, c := range buf[:n] {
				way <- c
			}
		}
	}()
	go func() {
		const piece = 60
		for c := range way {
			b := []byte{c}
			for len(b) < piece && len(way) > 0 {
				b = append(b, <-way)
			}
			s.bytes.Add(int64(len(b)))
			time.Sleep(time.Duration(len(b)) * time.Second / perSecond)
			down(b)
		}
	}()
	go func() {
		for {
			buf := make([]byte, 64)
			n, err := s.emu.Read(buf)
			if err != nil {
				return
			}
			up(buf[:n])
		}
	}()
	go func() {
		s.ended <- Open(Options{Source: src, Clock: quick{time.Now(), 1}, In: tty, Out: tty, Tick: time.Second,
			Getenv: func(string) string { return "" }, Save: func() {}, Exit: func(int) {}})
	}()
	s.see("1/256")
	time.Sleep(time.Second)
	before := s.bytes.Load()
	for range 90 {
		up([]byte("j"))
		time.Sleep(time.Second / 30)
	}
	released := time.Now()
	s.see("91/256")
	took := time.Since(released)
	t.Logf("right %.1f s after the release, %d bytes", took.Seconds(), s.bytes.Load()-before)
	master.WriteString("q")
	<-s.ended
	master.Close()
	tty.Close()
	return took
}

// A resize of the terminal is followed, many of them at once are gathered.
func TestResizes(t *testing.T) {
	src := source(t, 8)
	src.Fixed = true
	s := start(t, src, 80, 24, 1, false)
	s.see("1/32")
	time.Sleep(100 * time.Millisecond)
	m := newModel(Options{Source: src, Clock: quick{time.Now(), 1}}, &pace{now: time.Now})
	settles := 0
	for i := range 200 {
		_, cmd := m.Update(tea.WindowSizeMsg{Width: 60 + i%90, Height: 20 + i%30})
		if cmd != nil {
			settles++
		}
	}
	if settles > 2 {
		t.Errorf("200 resizes lay the screen out %d times", settles)
	}
}

// A task that panics, and a screen that cannot be drawn, are written down and
// said; the program goes on.
func TestPanics(t *testing.T) {
	dir := t.TempDir()
	src := source(t, 8)
	m := newModel(Options{Source: src, Clock: quick{time.Now(), 1}, Crash: term.CrashLog{Path: dir + "/crash.log"}}, &pace{now: time.Now})
	m.Update(tea.WindowSizeMsg{Width: 80, Height: 24})
	cmd := m.commands([]desk.Task{{Name: "adding up", Run: func() any { panic("two and two") }}})
	m.Update(cmd())
	if v := m.View(); !strings.Contains(v, "adding up: two and two; written to") {
		t.Errorf("on the screen:\n%s", v)
	}
	m.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("j")})
	m.desk = nil // what follows panics
	if v := m.View(); !strings.Contains(v, "cannot be drawn") {
		t.Errorf("on the screen:\n%s", v)
	}
	log, err := os.ReadFile(dir + "/crash.log")
	if err != nil || !strings.Contains(string(log), "two and two") || !strings.Contains(string(log), "app_test.go") || !strings.Contains(string(log), "nil pointer") {
		t.Errorf("crash log: %v\n%s", err, log)
	}
}

// However seldom the screen goes on, what is half typed is kept each second.
func TestBeat(t *testing.T) {
	for _, tick := range []time.Duration{0, time.Minute, time.Second} {
		src := source(t, 16)
		book := check.Logged(t, &src, "observer 1")
		m := newModel(Options{Source: src, Clock: quick{time.Now(), 1}, Tick: tick}, &pace{now: time.Now})
		run := func(tasks []desk.Task) {
			for len(tasks) > 0 {
				tasks = append(tasks[1:], m.desk.Apply(tasks[0].Run())...)
			}
		}
		run(m.start)
		for _, k := range []string{"a", "N", "o", "v", "a"} {
			run(m.desk.Key(k))
		}
		if (m.nextBeat() == nil) != (tick == time.Second) {
			t.Errorf("tick %v: beats %v", tick, m.nextBeat() != nil)
		}
		run(m.desk.Beat(check.Start.Add(time.Second)))
		if text, err := book.Draft(context.Background(), src.Session, kit.OnEntry); err != nil || !strings.HasPrefix(text, "Nova") {
			t.Errorf("tick %v: the draft is %q, %v", tick, text, err)
		}
	}
}
