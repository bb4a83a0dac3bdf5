package kit

import (
	"slices"
	"strings"
)

// Action is what a key does.
type Action string

// The actions.
const (
	Down        Action = "down"
	Up          Action = "up"
	HalfDown    Action = "half a page down"
	HalfUp      Action = "half a page up"
	First       Action = "first"
	Last        Action = "last"
	OpenStar    Action = "open"
	FilterList  Action = "filter"
	SortList    Action = "sort"
	ReverseSort Action = "reverse"
	MarkStar    Action = "mark"
	AddStar     Action = "add"
	CopyLines   Action = "copy"
	RankAnew    Action = "rank"
	NextStar    Action = "next star"
	PriorStar   Action = "prior star"
	MinuteLess  Action = "minute less"
	MinuteMore  Action = "minute more"
	TenLess     Action = "ten minutes less"
	TenMore     Action = "ten minutes more"
	HourLess    Action = "hour less"
	HourMore    Action = "hour more"
	NightLess   Action = "night before"
	NightMore   Action = "night after"
	BackToNow   Action = "now"
	ChangeTheme Action = "theme"
	ShowHelp    Action = "help"
	Back        Action = "back"
	Leave       Action = "leave"
	NextField   Action = "next field"
	PriorField  Action = "prior field"
	EmptyField  Action = "empty field"
	TakeStep    Action = "take"
	TakeNow     Action = "take now"
	FrameDone   Action = "frame done"
	StopEarly   Action = "stop"
	AbortTake   Action = "abort"
	SetUp       Action = "set up"
	WriteNote   Action = "note"
	OpenWeather Action = "conditions"
	OpenLog     Action = "log"
	BellSwitch  Action = "bell"
	ClockOffset Action = "offset"
	GradeGood   Action = "good"
	GradeUsable Action = "usable"
	GradePoor   Action = "poor"
	VoidEntry   Action = "void"
	Finish      Action = "finish"
	OpenDiagram Action = "diagram"
	OtherAxes   Action = "other axes"
	NearLeft    Action = "nearest on the left"
	NearRight   Action = "nearest on the right"
	NearUp      Action = "nearest above"
	NearDown    Action = "nearest below"
	ZoomIn      Action = "zoom in"
	ZoomOut     Action = "zoom out"
	ZoomAll     Action = "zoom to all"
	OpenEvents  Action = "events"
	LongerRange Action = "longer range"
	ShortRange  Action = "shorter range"
	OnlyCan     Action = "only what can be observed"
	Quadratures Action = "quadratures"
	LightCurve  Action = "light curve"
	EnterMag    Action = "enter a magnitude"
	RemoveMag   Action = "remove a magnitude"
	OpenDome    Action = "dome"
	CursorLeft  Action = "cursor left"
	CursorRight Action = "cursor right"
	CursorUp    Action = "cursor up"
	CursorDown  Action = "cursor down"
	CursorAway  Action = "cursor away"
	TurnDome    Action = "turn"
	OpenFinder  Action = "picture"
	NorthUp     Action = "north up"
)

// Binding is one row of the table of keys: it makes the handler, the footer,
// the help screen and the table in README.
type Binding struct {
	Do    Action
	Press []string // as the terminal names them
	Show  string   // as people write them
	Short string   // for the footer; "" not there
	Long  string   // for help and README
	On    []string // screens; nil: everywhere but in fields
}

// The screens by name.
const (
	OnNext    = "next"
	OnStar    = "star"
	OnEntry   = "new target"
	OnCopy    = "copy"
	OnHelp    = "help"
	OnField   = "filter" // a line being typed
	OnSort    = "sort"
	OnLog     = "log"
	OnWeather = "conditions"
	OnDiagram = "diagram"
	OnEvents  = "events"
	OnDome    = "dome"
	OnFinder  = "finder"
)

var (
	lists = []string{OnNext, OnStar, OnEvents, OnHelp, OnCopy, OnLog}
	work  = []string{OnNext, OnStar, OnDiagram, OnEvents, OnDome, OnFinder, OnLog}
	stars = []string{OnNext, OnStar, OnDiagram, OnEvents, OnDome, OnFinder}
	all   = []string{OnNext, OnStar, OnDiagram, OnEvents, OnDome, OnFinder, OnHelp, OnCopy, OnLog}
	timed = []string{OnNext, OnStar, OnDome, OnFinder} // where the keys of time are
)

// Bindings is the table of keys. Every movement has a letter; no key needs
// ctrl, alt or a function key, and none that ends an arrow's code (A to D, H,
// F, O) changes anything.
var Bindings = []Binding{
	{Down, []string{"j", "down"}, "j, down", "", "one line down", lists},
	{Up, []string{"k", "up"}, "k, up", "", "one line up", lists},
	{HalfDown, []string{"d", "pgdown", " ", "space"}, "d, space, page down", "", "half a page down", lists},
	{HalfUp, []string{"u", "pgup"}, "u, page up", "", "half a page up", lists},
	{First, []string{"g", "home"}, "g, home", "", "to the first line", lists},
	{Last, []string{"G", "end"}, "G, end", "", "to the last line", lists},
	{OpenStar, []string{"enter"}, "enter", "star", "look at the selected star closely", []string{OnNext, OnDiagram, OnEvents, OnDome, OnFinder}},
	{ShortRange, []string{"["}, "[", "[ ] nights", "fewer nights ahead: 30, 7, 3, 1", []string{OnEvents}},
	{LongerRange, []string{"]"}, "]", "", "more nights ahead", []string{OnEvents}},
	{Quadratures, []string{"Q"}, "Q", "quadratures", "quadratures too, or without them", []string{OnEvents}},
	{OnlyCan, []string{"y"}, "y", "only can", "only what can be observed, or everything", []string{OnEvents}},
	{OtherAxes, []string{"h"}, "h", "axes", "luminosity against temperature, or absolute magnitude against colour", []string{OnDiagram}},
	{ZoomIn, []string{"+", "="}, "+", "+ - 0 zoom", "twice as large, around the selected star", []string{OnDiagram, OnFinder}},
	{ZoomOut, []string{"-"}, "-", "", "half as large", []string{OnDiagram, OnFinder}},
	{ZoomAll, []string{"0"}, "0", "", "the whole diagram, or field", []string{OnDiagram, OnFinder}},
	{NearLeft, []string{"left", "("}, "left, (", "", "the nearest star on the left: hotter, bluer", []string{OnDiagram}},
	{NearRight, []string{"right", ")"}, "right, )", "", "the nearest on the right: cooler, redder", []string{OnDiagram}},
	{NearUp, []string{"k", "up"}, "k, up", "", "the nearest above: more luminous", []string{OnDiagram}},
	{NearDown, []string{"j", "down"}, "j, down", "", "the nearest below: fainter", []string{OnDiagram}},
	{CursorLeft, []string{"left", "("}, "arrows, (", "cursor", "a cursor over the sky, left, right, up, down: azimuth, altitude, airmass, brightness, distance from the Moon there; enter selects the nearest target", []string{OnDome}},
	{CursorRight, []string{"right", ")"}, "right, )", "", "the cursor to the right", []string{OnDome}},
	{CursorUp, []string{"up", "K"}, "up, K", "", "the cursor up", []string{OnDome}},
	{CursorDown, []string{"down", "J"}, "down, J", "", "the cursor down", []string{OnDome}},
	{CursorAway, []string{"0"}, "0", "", "the cursor away", []string{OnDome}},
	{TurnDome, []string{"y"}, "y", "turn", "turn by 90 degrees: another azimuth in the middle", []string{OnDome}},
	{FilterList, []string{"/"}, "/", "filter", "filter by words and conditions: lep kind=wd alt>35 V<16 stage=TPAGB", []string{OnNext}},
	{SortList, []string{"s"}, "s", "sort", "order by a column, named by a letter", []string{OnNext}},
	{ReverseSort, []string{"S"}, "S", "", "reverse the order", []string{OnNext}},
	{RankAnew, []string{"r"}, "r", "", "put the list into the order that holds now; it waits while you type", []string{OnNext}},
	{MarkStar, []string{"m"}, "m", "mark", "mark or unmark the star; / mark=yes lists the marked", stars},
	{TakeStep, []string{"t"}, "t", "take", "the loop's next step: slew to the selected star, acquire, expose, accept and log", work},
	{OpenLog, []string{"l"}, "l", "log", "the log of the night and what is owed", stars},
	{AddStar, []string{"a"}, "a", "add", "type or paste a new target", stars},
	{CopyLines, []string{"c"}, "c", "copy", "send the hand-over lines to the clipboard and show them plainly", stars},
	{NextStar, []string{"j"}, "j", "j k stars", "the next star of the list", []string{OnDome, OnFinder}},
	{PriorStar, []string{"k"}, "k", "", "the star before", []string{OnDome, OnFinder}},
	{NextStar, []string{"."}, ".", ". , stars", "the next star of the list", []string{OnStar, OnDiagram}},
	{NextStar, []string{"."}, ".", "", "the next star of the list", []string{OnDome, OnFinder}},
	{PriorStar, []string{","}, ",", "", "the star before", []string{OnStar, OnDiagram, OnDome, OnFinder}},
	{LightCurve, []string{"L"}, "L", "light", "the light curve, measured and forecast, in place of the night's course; high screens show both", []string{OnStar}},
	{EnterMag, []string{"M"}, "M", "mag", "enter a magnitude measured now: 8.1, or <12.5 for not seen; another band or time behind it", stars},
	{RemoveMag, []string{"R"}, "R", "", "remove the last magnitude entered for this star, or one by its number; it is kept as void (asks)", stars},
	{OpenDiagram, []string{"h"}, "h", "HR", "the Hertzsprung-Russell diagram: where in their lives the stars of the list stand", []string{OnNext, OnStar, OnEvents, OnDome, OnFinder}},
	{OpenEvents, []string{"E"}, "E", "events", "what happens when: eclipses, maxima and other dated happenings of tonight and the coming nights", []string{OnNext, OnStar, OnDiagram, OnDome, OnFinder}},
	{OpenDome, []string{"z"}, "z", "sky", "where in the sky: zenith, horizon, Moon, the selected star and where it is going, how bright the sky is, the limits", []string{OnNext, OnStar, OnDiagram, OnEvents, OnFinder}},
	{OpenFinder, []string{"p"}, "p", "field", "the picture of the field: detector or slit, neighbours, offset stars, as the camera shows it", []string{OnNext, OnStar, OnDiagram, OnEvents, OnDome}},
	{NorthUp, []string{"y"}, "y", "north up", "north up and east left, or as the camera shows it", []string{OnFinder}},
	{TenLess, []string{"["}, "[", "[ ] time", "10 minutes earlier; the time shown is then one of your own", timed},
	{TenMore, []string{"]"}, "]", "", "10 minutes later", timed},
	{MinuteLess, []string{"-"}, "-", "", "1 minute earlier", []string{OnNext, OnStar, OnDome}},
	{MinuteMore, []string{"+", "="}, "+", "", "1 minute later", []string{OnNext, OnStar, OnDome}},
	{HourLess, []string{"{"}, "{", "", "1 hour earlier", timed},
	{HourMore, []string{"}"}, "}", "", "1 hour later", timed},
	{NightLess, []string{"<"}, "<", "", "the night before, same time", []string{OnNext, OnStar, OnEvents, OnDome, OnFinder}},
	{NightMore, []string{">"}, ">", "", "the night after, same time", []string{OnNext, OnStar, OnEvents, OnDome, OnFinder}},
	{BackToNow, []string{"n"}, "n", "", "back to now, and on with the clock", []string{OnNext, OnStar, OnEvents, OnDome, OnFinder}},
	{TakeNow, []string{"T"}, "T", "", "straight to exposing; then t accepts: a take in two keys", work},
	{FrameDone, []string{"f"}, "f", "", "count a frame by hand", work},
	{StopEarly, []string{"x"}, "x", "", "stop early: what is done is logged", work},
	{AbortTake, []string{"X"}, "X", "", "abort: logged as void (asks)", work},
	{SetUp, []string{"e"}, "e", "", "frames, seconds, first file and type of the take: 3x90 obs0042, or flat 11x3 b0001", work},
	{WriteNote, []string{"o"}, "o", "", "write a note into the log, or a fault (fault: ...)", work},
	{OpenWeather, []string{"w"}, "w", "", "conditions: seeing, cloud, wind, humidity, dome", work},
	{GradeGood, []string{"1"}, "1", "1 2 3 grade", "grade the entry good", []string{OnLog}},
	{GradeUsable, []string{"2"}, "2", "", "usable", []string{OnLog}},
	{GradePoor, []string{"3"}, "3", "", "poor: it does not count as a visit", []string{OnLog}},
	{VoidEntry, []string{"0"}, "0", "void", "void: the entry stays and does not count (asks)", []string{OnLog}},
	{BellSwitch, []string{"b"}, "b", "", "bell at the end of an exposure, before events and limits: on, off", work},
	{ClockOffset, []string{"i"}, "i", "", "how many seconds the instrument's clock is ahead; logged with each take", work},
	{ChangeTheme, []string{"v"}, "v", "", "theme: dark, red for night vision, plain", all},
	{ShowHelp, []string{"?"}, "?", "help", "the keys and signs of this screen", []string{OnNext, OnStar, OnDiagram, OnEvents, OnDome, OnFinder, OnCopy, OnLog}},
	{Back, []string{"esc", "backspace"}, "esc", "", "dismiss a message, else back; nothing typed is lost", all},
	{Leave, []string{"q"}, "q", "leave", "leave this screen, from the list the program; asks once (y) if something is half typed", all},

	{NextField, []string{"enter", "down", "tab"}, "enter, tab, down", "next field", "the next field; on the last one enter adds the target, or saves", []string{OnEntry, OnWeather}},
	{PriorField, []string{"up", "shift+tab"}, "up", "", "the field before", []string{OnEntry, OnWeather}},
	{EmptyField, []string{"ctrl+u"}, "ctrl+u", "", "empty the field", []string{OnEntry, OnWeather, OnField}},
	{Finish, []string{"enter"}, "enter", "", "done", []string{OnField}},
	{Back, []string{"esc"}, "esc", "back, kept", "back to the list; what is typed stays for when you return", []string{OnEntry, OnWeather, OnField, OnSort}},
}

// Lookup returns what a key does on a screen; "": nothing.
func Lookup(screen, press string) Action {
	for i := range Bindings {
		b := &Bindings[i]
		if slices.Contains(b.On, screen) && slices.Contains(b.Press, press) {
			return b.Do
		}
	}
	return ""
}

// Scroll moves the first line shown as a key says; the end is far beyond, for
// the screen to hold back.
func Scroll(do Action, top, page int) int {
	switch do {
	case Down:
		return top + 1
	case Up:
		return top - 1
	case HalfDown:
		return top + page
	case HalfUp:
		return top - page
	case First:
		return 0
	case Last:
		return 1 << 20
	}
	return top
}

// KeysOn lists the bindings of a screen.
func KeysOn(screen string) []Binding {
	var out []Binding
	for _, b := range Bindings {
		if slices.Contains(b.On, screen) {
			out = append(out, b)
		}
	}
	return out
}

// Footer writes the keys of a screen that are worth a place on its last line,
// as many as fit; help and leaving always.
func Footer(screen string, width int) string {
	parts := footers[screen]
	for n := len(parts); n > 0; n-- {
		// the last two are help and leave where a screen has both
		keep := min(2, n)
		text := strings.Join(append(slices.Clone(parts[:n-keep]), parts[len(parts)-keep:]...), "  ")
		if len(text) <= width {
			return text
		}
	}
	return Cut(strings.Join(parts, "  "), width)
}

var footers = func() map[string][]string {
	out := map[string][]string{}
	for _, screen := range []string{OnNext, OnStar, OnEntry, OnCopy, OnHelp, OnField, OnLog, OnWeather, OnDiagram, OnEvents, OnDome, OnFinder} {
		for _, b := range KeysOn(screen) {
			switch {
			case b.Short == "":
			case strings.HasPrefix(b.Short, b.Show+" "):
				out[screen] = append(out[screen], b.Short)
			default:
				show, _, _ := strings.Cut(b.Show, ",")
				out[screen] = append(out[screen], show+" "+b.Short)
			}
		}
	}
	out[OnSort] = []string{SortLetters(1)}
	return out
}()

// KeyTable writes the table of keys in Markdown, for README.
func KeyTable() string {
	var b strings.Builder
	b.WriteString("| key | on | what it does |\n|---|---|---|\n")
	for _, k := range Bindings {
		keys := "`" + strings.ReplaceAll(k.Show, ", ", "` `") + "`"
		b.WriteString("| " + keys + " | " + strings.Join(k.On, ", ") + " | " + k.Long + " |\n")
	}
	return b.String()
}

// sortLetters names the letter and the heading of each order.
var sortLetters = []struct{ letter, key, word string }{
	{"t", "next", "take next"}, {"n", "name", "name"}, {"k", "kind", "kind"}, {"e", "stage", "stage"}, {"m", "mag", "mag"},
	{"a", "alt", "alt"}, {"x", "x", "X"}, {"b", "best", "best"}, {"y", "bestx", "best X"}, {"l", "left", "left"},
	{"u", "ends", "ends by"}, {"o", "moon", "Moon"}, {"r", "ra", "RA"}, {"c", "dec", "dec"}, {"p", "period", "period"}, {"i", "mark", "marked"},
}

// SortKey returns the order that a letter means; "": none.
func SortKey(letter string) string {
	for _, s := range sortLetters {
		if s.letter == letter {
			return s.key
		}
	}
	return ""
}

// SortLetters writes the letters of the orders, on two lines: 0 and 1.
func SortLetters(line int) string {
	const first = 8
	list := sortLetters[:first]
	if line > 0 {
		list = sortLetters[first:]
	}
	var parts []string
	for _, s := range list {
		parts = append(parts, s.letter+" "+s.word)
	}
	return strings.Join(parts, "  ")
}

// SortLettersAlone writes the letters without their words, for narrow
// screens.
func SortLettersAlone() string {
	var parts []string
	for _, s := range sortLetters {
		parts = append(parts, s.letter)
	}
	return strings.Join(parts, " ")
}
