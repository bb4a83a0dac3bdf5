//go:build unix

package tui

import (
	"fmt"
	"math"
	"math/rand"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/creack/pty"

	"evenfall/astro"
	"evenfall/targets"
	"evenfall/targets/moment"
	"evenfall/targets/roster"
	"evenfall/tui/check"
	"evenfall/tui/desk"
	"evenfall/tui/kit"
)

// many is a list of random white dwarfs all over the sky.
func many(b *testing.B, n int) desk.Source {
	r := rand.New(rand.NewSource(5))
	list := make([]roster.Entry, n)
	for i := range list {
		list[i] = roster.Entry{Want: moment.Want{Weight: 1, Level: 0.8}, Target: targets.Target{Name: fmt.Sprintf("s%d", i), Kind: targets.WD,
			Place: targets.Place{RA: astro.Deg(360 * r.Float64()), Dec: astro.Rad(math.Asin(2*r.Float64() - 1)), EpochJyr: 2016, EpochGiven: true,
				PMRA: targets.Known(100 * r.NormFloat64()), PMDec: targets.Known(100 * r.NormFloat64())},
			Mags: map[targets.Band]targets.Measure{"G": targets.Known(12 + 8*r.Float64())}}}
	}
	src := check.Source(b, 64)
	src.Roster = roster.New(list, moment.NewModels(), nil)
	src.Look = kit.NewLook(kit.DarkTheme, kit.Colours256, kit.Braille)
	return src
}

// BenchmarkKeyToFrame presses j and k in a list of 360,000 stars that is
// worked out anew each second in the background, and reports the time from a
// key to the first byte of the frame that shows it: wanted p99 under 50 ms.
func BenchmarkKeyToFrame(b *testing.B) {
	src := many(b, 360_000)
	master, tty, err := pty.Open()
	if err != nil {
		b.Fatal(err)
	}
	pty.Setsize(tty, &pty.Winsize{Rows: 24, Cols: 80})
	emu := newEmulator(80, 24)
	wrote := make(chan time.Time, 1024)
	go func() {
		buf := make([]byte, 64)
		for {
			n, err := emu.Read(buf)
			if err != nil {
				return
			}
			master.Write(buf[:n])
		}
	}()
	go func() {
		buf := make([]byte, 65536)
		for {
			n, err := master.Read(buf)
			if err != nil {
				return
			}
			now := time.Now()
			if text := string(buf[:n]); strings.Contains(text, "/360000") { // the pane follows the cursor
				select {
				case wrote <- now:
				default:
				}
			}
			emu.Write(buf[:n])
		}
	}()
	ended := make(chan error, 1)
	go func() {
		ended <- Open(Options{Source: src, Clock: quick{time.Now(), 1}, In: tty, Out: tty, Tick: time.Second,
			Getenv: func(string) string { return "" }, Save: func() {}, Exit: func(int) {}})
	}()
	<-wrote
	time.Sleep(2 * time.Second)
	var took []time.Duration
	pauses := rand.New(rand.NewSource(1))
	b.ResetTimer()
	for i := range max(b.N, 200) {
		for len(wrote) > 0 {
			<-wrote
		}
		key := "j"
		if i%20 >= 10 {
			key = "k"
		}
		at := time.Now()
		master.WriteString(key)
		took = append(took, (<-wrote).Sub(at))
		time.Sleep(time.Duration(20+pauses.Intn(60)) * time.Millisecond)
	}
	b.StopTimer()
	slices.Sort(took)
	b.ReportMetric(float64(took[len(took)/2].Microseconds())/1000, "ms-p50")
	b.ReportMetric(float64(took[len(took)*99/100].Microseconds())/1000, "ms-p99")
	b.ReportMetric(0, "ns/op")
	master.WriteString("q")
	<-ended
	master.Close()
	tty.Close()
}
