package main

import (
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"evenfall/astro/check"
	"evenfall/tui/kit"
)

func readme(t *testing.T) string {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(check.Root(t), "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// The table of keys is the one that makes the handlers.
func TestReadmeKeys(t *testing.T) {
	if !strings.Contains(readme(t), "<!-- keys -->\n"+kit.KeyTable()) {
		t.Errorf("README.md has another table of keys than\n%s", kit.KeyTable())
	}
}

var shown = regexp.MustCompile("(?s)<!-- screen (\\w+) -->\n```\n(.*?)\n```")

// The screens it shows are those of testdata/screens.
func TestReadmeScreens(t *testing.T) {
	found := shown.FindAllStringSubmatch(readme(t), -1)
	if len(found) == 0 {
		t.Fatal("no screen in README.md")
	}
	for _, m := range found {
		golden, err := os.ReadFile(filepath.Join(check.Root(t), "testdata", "screens", m[1]+".txt"))
		if err != nil {
			t.Fatal(err)
		}
		var lines []string
		for _, l := range strings.Split(string(golden), "\n") {
			if len(l) > 2 && l[2] == '|' {
				lines = append(lines, l[3:])
			}
		}
		if want := strings.Join(lines, "\n"); m[2] != want {
			t.Errorf("README.md shows %s as\n%s\nwanted\n%s", m[1], m[2], want)
		}
	}
}
