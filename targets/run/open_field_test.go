package run

import (
	"testing"
	"testing/fstest"
)

// Neighbours come from the folder field, with its problems; without one there
// are none.
func TestField(t *testing.T) {
	fsys := fstest.MapFS{
		"field/a.csv": {Data: []byte("name,ra_deg,dec_deg,V\nn1,10,-20,9.5\nn2,10.1,-20,12\n")},
		"field/b.csv": {Data: []byte("name,ra_deg,dec_deg,V\nn3,500,-20,9\n")},
	}
	list, problems := Field(fsys, ".")
	if len(list) != 2 || list[0].Name != "n1" || len(problems) == 0 {
		t.Errorf("%d neighbours, %v", len(list), problems)
	}
	if list, problems := Field(fstest.MapFS{}, "x"); list != nil || problems != nil {
		t.Errorf("without a folder: %v %v", list, problems)
	}
}
