package order

import (
	"bytes"
	"fmt"
	"reflect"
	"strings"
	"testing"
)

// tiny is a night of two requests and a standard, to be written by hand.
const tiny = `{"format":"night-instance/1","name":"tiny","seed":1,"slot_min":5,"T":20,"now":2,"latitude":-30.5,
"items":[
{"id":"a","kind":"science","weight":1.5,"mode":0,"ra_h":1,"dec_d":-2,"visits":2,"min_gap":6,"bonus":50,"calib":null,"first":0,
 "dur":[3,3,3,3,3,3,3,3,3,3,3,3],"val":[10,11,12,13,14,15,16,17,18,19,20,21],"airmass":[1000,1000,1000,1000,1000,1000,1000,1000,1000,1000,1000,1000]},
{"id":"b","kind":"science","weight":2,"mode":1,"ra_h":1,"dec_d":-2,"visits":1,"min_gap":0,"bonus":9,"calib":{"window":4,"dx":100,"loss":333},"first":5,
 "dur":[2,0,2,2],"val":[100,100,101,100],"airmass":[1500,1500,1500,1700]},
{"id":"s","kind":"standard","weight":0,"mode":1,"ra_h":1,"dec_d":-2,"visits":1,"min_gap":0,"bonus":0,"calib":null,"first":4,
 "dur":[1,1,1,1,1,1,1,1,1],"val":[0,0,0,0,0,0,0,0,0],"airmass":[1590,1590,1590,1590,1590,1590,1590,1590,1590]}],
"setup":[[1,2,1],[2,1,1],[1,1,1]],"setup0":[1,1,1],"locks":[]}`

func tinyProblem(t testing.TB) *Problem {
	p, err := Read(strings.NewReader(tiny))
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// TestEvaluateRules holds the judge to values worked out by hand.
func TestEvaluateRules(t *testing.T) {
	p := tinyProblem(t)
	for _, c := range []struct {
		plan []Take
		lock []Take
		want int
		err  string
	}{
		{nil, nil, 0, ""},
		{[]Take{{0, 3}}, nil, 13, ""},
		{[]Take{{0, 2}}, nil, 0, "ready only in 3"},
		{[]Take{{0, 3}, {0, 9}}, nil, 13 + 19 + 50, ""},
		{[]Take{{0, 3}, {0, 8}}, nil, 0, "at least 6 apart"},
		{[]Take{{1, 5}}, nil, 66, ""}, // floor(100 x 667/1000); a single visit has no bonus
		{[]Take{{1, 6}}, nil, 0, "cannot start in slot 6"},
		{[]Take{{1, 5}, {2, 8}}, nil, 100, ""},
		{[]Take{{2, 4}, {1, 8}}, nil, 66, ""},           // airmass 1700 and 1590 are too far apart
		{[]Take{{1, 7}, {2, 12}}, nil, 67, ""},          // five slots are too far
		{[]Take{{1, 7}, {2, 11}}, nil, 101, ""},         // four are not
		{[]Take{{2, 4}, {1, 5}}, nil, 0, "ready only"},  // the take before ends in 5, the move takes 1
		{[]Take{{1, 5}, {1, 8}}, nil, 0, "its 1 visit"}, // more often than it may
		{[]Take{{0, 3}}, []Take{{1, 5}}, 0, "is missing"},
		{[]Take{{7, 3}}, nil, 0, "no item 7"},
	} {
		q := *p
		q.Locks = c.lock
		v, err := q.Evaluate(c.plan)
		if c.err == "" && (err != nil || v != c.want) || c.err != "" && (err == nil || !strings.Contains(err.Error(), c.err)) {
			t.Errorf("%v: %d, %v; want %d, %q", c.plan, v, err, c.want, c.err)
		}
	}
	q := *p
	q.T = 14
	if _, err := q.Evaluate([]Take{{0, 3}, {0, 12}}); err == nil {
		t.Error("a take past its table was allowed")
	}
}

// TestKnownPlans judges the best plans known and finds the values given with
// them.
func TestKnownPlans(t *testing.T) {
	ps, ks := problems(t, everyProblem...)
	for _, n := range everyProblem {
		var plan []Take
		for _, x := range ks[n].Plan {
			plan = append(plan, Take{x[0], x[1]})
		}
		if v, err := ps[n].Evaluate(plan); err != nil || v != ks[n].Best {
			t.Errorf("%s: %d, %v; want %d", n, v, err, ks[n].Best)
		}
	}
}

// TestReadSaysWhere breaks the file in many ways and looks for place and cause.
func TestReadSaysWhere(t *testing.T) {
	for _, c := range []struct{ from, to, want string }{
		{`"T":20`, `"T":"20"`, "1:"},
		{`"T":20`, `"T":20.5`, "a whole number"},
		{`"T":20`, `"TT":20`, `unknown field "TT"`},
		{`"T":20,`, ``, "T: missing"},
		{`"T":20`, `"T":-1`, "T -1"},
		{`"now":2`, `"now":21`, "now 21"},
		{`night-instance/1`, `night-instance/2`, `format "night-instance/2"`},
		{`"slot_min":5`, `"slot_min":0`, "slot_min 0"},
		{`"latitude":-30.5`, `"latitude":-90.5`, "latitude -90.5"},
		{`"kind":"standard"`, `"kind":"star"`, `items[2].kind "star"`},
		{`"visits":2`, `"visits":0`, "items[0].visits 0"},
		{`"min_gap":6`, `"min_gap":-6`, "items[0].min_gap -6"},
		{`"bonus":50`, `"bonus":-1`, "items[0].bonus -1"},
		{`"loss":333`, `"loss":1001`, "items[1].calib.loss 1001"},
		{`"dx":100,`, ``, "items[1].calib.dx: missing"},
		{`"dur":[2,0,2,2]`, `"dur":[2,0,2]`, "items[1].val: 4 entries, but dur has 3"},
		{`"dur":[2,0,2,2]`, `"dur":[2,-1,2,2]`, "items[1].dur[1] -1"},
		{`"val":[100,`, `"val":[-100,`, "items[1].val[0] -100"},
		{`"first":5`, `"first":18`, "items[1].dur: 4 entries from slot 18 run past"},
		{`"setup":[[1,2,1],`, `"setup":[[1,2],`, "setup[0]: 2 entries for 3 items"},
		{`"setup0":[1,1,1]`, `"setup0":[1,1]`, "setup0: 2 entries for 3 items"},
		{`"setup0":[1,1,1]`, `"setup0":[1,1,-1]`, "setup0[2] -1"},
		{`"locks":[]`, `"locks":[{"item":3,"start":1}]`, "locks[0].item 3"},
		{`"locks":[]`, `"locks":[{"item":1}]`, "locks[0].start: missing"},
		{`"locks":[]}`, `"locks":[]} x`, "something follows"},
		{`"locks":[]}`, `"locks":[]`, "the file ends before"},
		{`"visits":2`, `"visits":2 "x"`, "3:"},
	} {
		broken := strings.Replace(tiny, c.from, c.to, 1)
		if broken == tiny {
			t.Fatalf("%q is not in the file", c.from)
		}
		if _, err := Read(strings.NewReader(broken)); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v; want %q", c.to, err, c.want)
		}
	}
}

// TestReadWrite reads what it has written.
func TestReadWrite(t *testing.T) {
	r := newRandom(1)
	for n := range 40 {
		p := madeUp(r, shape{items: r.below(9), slots: 20, multi: true, std: true, locks: n % 2})
		for i := range p.Items { // the writer makes empty lists of none
			if p.Items[i].Dur == nil {
				p.Items[i].Dur, p.Items[i].Val, p.Items[i].Airmass = []int{}, []int{}, []int{}
			}
		}
		var buf bytes.Buffer
		if err := p.Write(&buf); err != nil {
			t.Fatal(err)
		}
		q, err := Read(&buf)
		if err != nil {
			t.Fatal(err)
		}
		if fmt.Sprintf("%+v", flat(p)) != fmt.Sprintf("%+v", flat(q)) {
			t.Errorf("night %d:\n%+v\n%+v", n, flat(p), flat(q))
		}
	}
	p := tinyProblem(t)
	p.Items[0].Visits = 0
	if err := p.Write(&bytes.Buffer{}); err == nil {
		t.Error("a faulty problem was written")
	}
}

// flat is a problem with what it points to.
func flat(p *Problem) []any {
	out := []any{p.Name, p.T, p.Now, p.SlotMin, p.Setup, p.Setup0, p.Locks}
	for _, it := range p.Items {
		c := Calib{-1, -1, -1}
		if it.Calib != nil {
			c = *it.Calib
		}
		it.Calib = nil
		out = append(out, it, c)
	}
	return out
}

// TestRest takes what is done off a night.
func TestRest(t *testing.T) {
	p := tinyProblem(t)
	r, err := p.Rest(7, []Take{{0, 3}})
	if err != nil {
		t.Fatal(err)
	}
	a := r.Items[0]
	if a.Visits != 1 || a.Bonus != 0 || a.Val[9] != 19+50 || a.Dur[8] != 0 || a.Dur[9] != 3 {
		t.Errorf("one of two visits done: %+v", a)
	}
	if r.Now != 7 || !reflect.DeepEqual(r.Setup0, []int{1, 2, 1}) || p.Items[0].Visits != 2 || p.Items[0].Dur[0] != 3 {
		t.Errorf("now %d, first moves %v, old %+v", r.Now, r.Setup0, p.Items[0])
	}
	if r, err = p.Rest(4, []Take{{2, 4}, {0, 6}, {0, 12}}); err != nil || len(r.Items[0].Dur) != 0 || r.Items[1].Calib == nil {
		t.Errorf("all visits done: %+v, %v", r.Items[0], err)
	}
	p.Items[1].Airmass[3] = 1500
	if r, err = p.Rest(4, []Take{{2, 5}}); err != nil || r.Items[1].Calib != nil {
		t.Errorf("served by the standard already taken: %+v, %v", r.Items[1], err)
	}
	if _, err := p.Rest(21, nil); err == nil {
		t.Error("a slot past the night was taken")
	}
	if _, err := p.Rest(4, []Take{{9, 1}}); err == nil {
		t.Error("an item that is not there was taken")
	}
}

func FuzzRead(f *testing.F) {
	f.Add([]byte(tiny))
	f.Add([]byte(`{"format":"night-instance/1"}`))
	f.Add([]byte(`[1,2`))
	f.Add([]byte(strings.Replace(tiny, `"locks":[]`, `"locks":[{"item":1,"start":6}]`, 1)))
	f.Fuzz(func(t *testing.T, raw []byte) {
		p, err := Read(bytes.NewReader(raw))
		if err != nil {
			if err.Error() == "" {
				t.Error("an error without words")
			}
			return
		}
		var one, two bytes.Buffer
		if err := p.Write(&one); err != nil {
			t.Fatal(err)
		}
		q, err := Read(bytes.NewReader(one.Bytes()))
		if err != nil {
			t.Fatal(err)
		}
		if err := q.Write(&two); err != nil || one.String() != two.String() {
			t.Fatal("written otherwise the second time", err)
		}
		if len(p.Items)*p.T > 20_000 || len(p.LockFaults()) > 0 {
			return
		}
		if _, err := Solve(t.Context(), p, 1, 1); err != nil {
			t.Fatal(err)
		}
	})
}
