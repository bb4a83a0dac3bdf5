package order

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strconv"
)

// The file's own shape; a pointer tells a missing key from a zero.
type fileProblem struct {
	Format   *string     `json:"format"`
	Name     *string     `json:"name"`
	Seed     *int64      `json:"seed"`
	SlotMin  *float64    `json:"slot_min"`
	T        *int        `json:"T"`
	Now      *int        `json:"now"`
	Latitude *float64    `json:"latitude"`
	Items    *[]fileItem `json:"items"`
	Setup    *[][]int    `json:"setup"`
	Setup0   *[]int      `json:"setup0"`
	Locks    *[]fileTake `json:"locks"`
}

type fileItem struct {
	ID      *string    `json:"id"`
	Kind    *string    `json:"kind"`
	Weight  *float64   `json:"weight"`
	Mode    *int       `json:"mode"`
	RAh     *float64   `json:"ra_h"`
	Decd    *float64   `json:"dec_d"`
	Visits  *int       `json:"visits"`
	MinGap  *int       `json:"min_gap"`
	Bonus   *int       `json:"bonus"`
	Calib   *fileCalib `json:"calib"`
	First   *int       `json:"first"`
	Dur     *[]int     `json:"dur"`
	Val     *[]int     `json:"val"`
	Airmass *[]int     `json:"airmass"`
}

type fileCalib struct {
	Window *int `json:"window"`
	DX     *int `json:"dx"`
	Loss   *int `json:"loss"`
}

type fileTake struct {
	Item  *int `json:"item"`
	Start *int `json:"start"`
}

// maxFile is the longest file that is read, bytes.
const maxFile = 256 << 20

// Read reads a problem in the format night-instance/1.
//
// Returns:
//   - an error naming line and column, or the key, with what is wrong and what
//     to write instead. Unknown and missing keys and text after the problem are
//     refused; so is what [Problem.Check] refuses.
//
// Checked: TestReadSaysWhere, TestReadWrite, FuzzRead.
func Read(r io.Reader) (*Problem, error) {
	raw, err := io.ReadAll(io.LimitReader(r, maxFile+1))
	if err != nil {
		return nil, fmt.Errorf("reading the problem: %w", err)
	}
	if len(raw) > maxFile {
		return nil, fmt.Errorf("the problem is longer than %d bytes", maxFile)
	}
	dec := json.NewDecoder(bytes.NewReader(raw))
	dec.DisallowUnknownFields()
	var f fileProblem
	if err := dec.Decode(&f); err != nil {
		return nil, placed(raw, dec.InputOffset(), err)
	}
	if _, err := dec.Token(); err != io.EOF {
		line, col := place(raw, dec.InputOffset())
		return nil, fmt.Errorf("%d:%d: something follows the problem; a file holds one", line, col)
	}
	p, err := f.problem()
	if err != nil {
		return nil, err
	}
	if err := p.Check(); err != nil {
		return nil, err
	}
	return p, nil
}

// placed puts line and column before an error of the JSON reader.
func placed(raw []byte, read int64, err error) error {
	var syntax *json.SyntaxError
	var kind *json.UnmarshalTypeError
	switch {
	case errors.As(err, &syntax):
		line, col := place(raw, syntax.Offset)
		return fmt.Errorf("%d:%d: not JSON: %v", line, col, err)
	case errors.As(err, &kind):
		line, col := place(raw, kind.Offset)
		return fmt.Errorf("%d:%d: %s: %s does not fit; write %s", line, col, kind.Field, kind.Value, noun(kind.Type.String()))
	case errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF):
		line, col := place(raw, int64(len(raw)))
		return fmt.Errorf("%d:%d: the file ends before the problem does", line, col)
	}
	line, col := place(raw, read)
	return fmt.Errorf("%d:%d: %v; keys are those of %s", line, col, err, Format)
}

// noun says in words what a key of the file takes.
func noun(kind string) string {
	switch kind {
	case "int", "int64":
		return "a whole number"
	case "float64":
		return "a number"
	case "string":
		return "text"
	}
	return "what " + Format + " has there"
}

// place turns an offset into line and column, both from 1.
func place(raw []byte, offset int64) (line, col int) {
	head := raw[:min(max(offset, 0), int64(len(raw)))]
	line = 1 + bytes.Count(head, []byte{'\n'})
	return line, len(head) - (bytes.LastIndexByte(head, '\n') + 1) + 1
}

// keys collects the first missing key.
type keys struct{ err error }

func need[V any](k *keys, at string, v *V) V {
	if v != nil {
		return *v
	}
	if k.err == nil {
		k.err = fmt.Errorf("%s: missing; %s wants it", at, Format)
	}
	var none V
	return none
}

// problem turns the file's shape into a problem, or names a missing key.
func (f *fileProblem) problem() (*Problem, error) {
	k := &keys{}
	if name := need(k, "format", f.Format); k.err == nil && name != Format {
		return nil, fmt.Errorf("format %q: write %q", name, Format)
	}
	p := &Problem{Name: need(k, "name", f.Name), Seed: need(k, "seed", f.Seed), SlotMin: need(k, "slot_min", f.SlotMin),
		T: need(k, "T", f.T), Now: need(k, "now", f.Now), Latitude: need(k, "latitude", f.Latitude),
		Setup: need(k, "setup", f.Setup), Setup0: need(k, "setup0", f.Setup0)}
	items := need(k, "items", f.Items)
	p.Items = make([]Item, len(items))
	for i := range items {
		p.Items[i] = items[i].item(k, "items["+strconv.Itoa(i)+"].")
	}
	for i, l := range need(k, "locks", f.Locks) {
		at := "locks[" + strconv.Itoa(i) + "]."
		p.Locks = append(p.Locks, Take{need(k, at+"item", l.Item), need(k, at+"start", l.Start)})
	}
	return p, k.err
}

// item turns the file's shape of one item into an item.
func (f *fileItem) item(k *keys, at string) Item {
	it := Item{ID: need(k, at+"id", f.ID), Kind: need(k, at+"kind", f.Kind), Weight: need(k, at+"weight", f.Weight),
		Mode: need(k, at+"mode", f.Mode), RAh: need(k, at+"ra_h", f.RAh), Decd: need(k, at+"dec_d", f.Decd),
		Visits: need(k, at+"visits", f.Visits), MinGap: need(k, at+"min_gap", f.MinGap), Bonus: need(k, at+"bonus", f.Bonus),
		First: need(k, at+"first", f.First), Dur: need(k, at+"dur", f.Dur), Val: need(k, at+"val", f.Val),
		Airmass: need(k, at+"airmass", f.Airmass)}
	if c := f.Calib; c != nil {
		it.Calib = &Calib{need(k, at+"calib.window", c.Window), need(k, at+"calib.dx", c.DX), need(k, at+"calib.loss", c.Loss)}
	}
	return it
}

// Write writes the problem in the format night-instance/1, as one line.
// [Read] gives back an equal problem. It refuses what [Problem.Check] refuses.
//
// Checked: TestReadWrite, FuzzRead.
func (p *Problem) Write(w io.Writer) error {
	if err := p.Check(); err != nil {
		return err
	}
	format := Format
	items := make([]fileItem, len(p.Items))
	for i := range p.Items {
		it := p.Items[i]
		dur, val, air := filled(it.Dur), filled(it.Val), filled(it.Airmass)
		items[i] = fileItem{ID: &it.ID, Kind: &it.Kind, Weight: &it.Weight, Mode: &it.Mode, RAh: &it.RAh, Decd: &it.Decd,
			Visits: &it.Visits, MinGap: &it.MinGap, Bonus: &it.Bonus, First: &it.First, Dur: &dur, Val: &val, Airmass: &air}
		if c := it.Calib; c != nil {
			items[i].Calib = &fileCalib{&c.Window, &c.DX, &c.Loss}
		}
	}
	locks := make([]fileTake, len(p.Locks))
	for k := range p.Locks {
		locks[k] = fileTake{&p.Locks[k].Item, &p.Locks[k].Start}
	}
	setup := make([][]int, len(p.Setup))
	for i, row := range p.Setup {
		setup[i] = filled(row)
	}
	setup0 := filled(p.Setup0)
	return json.NewEncoder(w).Encode(fileProblem{&format, &p.Name, &p.Seed, &p.SlotMin, &p.T, &p.Now, &p.Latitude,
		&items, &setup, &setup0, &locks})
}

// filled makes an empty list of none, which the format writes as [].
func filled(xs []int) []int {
	if xs == nil {
		return []int{}
	}
	return xs
}
