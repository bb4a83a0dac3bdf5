package light

import (
	"fmt"
	"hash/maphash"
	"sync"

	"evenfall/targets"
	"evenfall/targets/stage"
)

// Shelf keeps states by the content of target and magnitudes, so that a list
// read anew, or one with a magnitude more, finds again what was worked out. It
// is safe for use by several goroutines.
type Shelf struct {
	mu     sync.Mutex
	seed   maphash.Seed
	states map[uint64]*State
}

// mostShelved is how many states a shelf holds before it is emptied.
const mostShelved = 4096

// NewShelf makes an empty shelf.
func NewShelf() *Shelf {
	return &Shelf{seed: maphash.MakeSeed(), states: map[uint64]*State{}}
}

// State returns the state of a target with its magnitudes, made if there was
// none of the same content.
//
// Checked: TestShelf.
func (h *Shelf) State(t targets.Target, v stage.Verdict, mags []targets.Magnitude) *State {
	var w maphash.Hash
	w.SetSeed(h.seed)
	fmt.Fprintf(&w, "%+v", t)
	for i := range mags {
		m := mags[i]
		m.At = targets.Where{} // where it stood in a file changes nothing
		fmt.Fprintf(&w, "%+v", m)
	}
	key := w.Sum64()
	h.mu.Lock()
	defer h.mu.Unlock()
	if s, ok := h.states[key]; ok {
		return s
	}
	if len(h.states) >= mostShelved {
		clear(h.states)
	}
	s := NewState(t, v, mags)
	h.states[key] = s
	return s
}
