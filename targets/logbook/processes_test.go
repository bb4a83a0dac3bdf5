package logbook

import (
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"evenfall/targets/store"
)

// beginHere is what a process started by TestHeldProcesses does: it begins a
// take at an agreed moment and says what came of it.
func beginHere(t *testing.T, job string) {
	parts := strings.Split(job, "|") // run.db, observer, round, when
	db, err := store.Open(parts[0])
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	b := Open(db, func() time.Time { return night }, parts[1])
	when, err := time.Parse(time.RFC3339Nano, parts[3])
	if err != nil {
		t.Fatal(err)
	}
	time.Sleep(time.Until(when))
	_, err = b.Begin(ctx, Take{Request: "R" + parts[2], Target: "R Lep", Phase: Slewing, PhaseAt: night, Began: night, Session: parts[1], Done: -1}, false)
	var held Held
	switch {
	case errors.As(err, &held):
		fmt.Println("TOLD " + held.By.Observer)
	case err != nil:
		t.Fatal(err)
	default:
		fmt.Println("BEGAN")
	}
}

// Two processes begin one request at the same moment, a hundred times: one
// begins, the other is told who has it.
func TestHeldProcesses(t *testing.T) {
	if job := os.Getenv("EVENFALL_TEST_BEGIN"); job != "" {
		beginHere(t, job)
		return
	}
	if testing.Short() {
		t.Skip("two hundred processes; not with -short")
	}
	path := filepath.Join(t.TempDir(), "run.db")
	db, err := store.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	for round := range 100 {
		when := time.Now().Add(150 * time.Millisecond).Format(time.RFC3339Nano)
		var said [2]string
		done := make(chan error, 2)
		for i := range said {
			go func() {
				c := exec.Command(os.Args[0], "-test.run", "^TestHeldProcesses$")
				c.Env = append(os.Environ(), fmt.Sprintf("EVENFALL_TEST_BEGIN=%s|observer %d|%d|%s", path, i+1, round, when))
				out, err := c.CombinedOutput()
				said[i] = string(out)
				done <- err
			}()
		}
		for range said {
			if err := <-done; err != nil {
				t.Fatal(err, said)
			}
		}
		began, told := 0, 0
		for i, s := range said {
			switch {
			case strings.Contains(s, "BEGAN"):
				began++
			case strings.Contains(s, fmt.Sprintf("TOLD observer %d", 2-i)):
				told++
			}
		}
		if began != 1 || told != 1 {
			t.Fatalf("round %d: %d began, %d were told: %q", round, began, told, said)
		}
	}
	if under, err := Open(db, nil, "").UnderWay(ctx); err != nil || len(under) != 100 {
		t.Errorf("%d takes under way, %v", len(under), err)
	}
}
