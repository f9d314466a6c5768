package floors

import (
	"strings"
	"testing"
	"testing/fstest"

	"github.com/stretchr/testify/require"
)

const house = "# House\n\n```text floors\nF0    low/a low/b\nF1    middle/a  middle/b\n\nF2    top\nside  data\n```\n"

// module builds a source tree with one file a line: "path: import import ...".
func module(lines ...string) fstest.MapFS {
	tree := fstest.MapFS{}
	for _, l := range lines {
		name, imports, _ := strings.Cut(l, ":")
		text := "package p\n"
		for _, i := range strings.Fields(imports) {
			text += "import _ \"" + i + "\"\n"
		}
		tree[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return tree
}

// sound is a tree that keeps to the table.
var sound = []string{
	"low/a/a.go: fmt",
	"low/b/b.go: m/low/a",
	"middle/a/a.go: m/low/a m/low/b other/top",
	"middle/a/a_test.go: m/middle/a m/middle/b m/data",
	"middle/b/b.go: m/middle/a",
	"top/top.go: m/middle/b m/low/a",
	"top/testdata/broken.go: m/nowhere",
	".hidden/x.go: m/nowhere",
	"data/data.go: m/low/b",
	"data/data_test.go: m/data m/low/a",
}

func check(t *testing.T, document string, lines ...string) []string {
	floors, err := parseTable(document)
	require.NoError(t, err)
	packages, references, err := scan(module(lines...), "m")
	require.NoError(t, err)
	return floors.violations(packages, references)
}

func TestSoundTreeIsAccepted(t *testing.T) {
	require.Empty(t, check(t, house, sound...))
}

func TestViolationsAreRefused(t *testing.T) {
	for line, want := range map[string]string{
		"low/a/x.go: m/middle/a":      "low/a/x.go imports middle/a: F1 is above F0",
		"low/a/x.go: m/low/b":         "low/a/x.go imports low/b: it is not to the left on F0",
		"low/b/x.go: m/low/b":         "low/b/x.go imports low/b: it is not to the left on F0",
		"low/b/x_test.go: m/middle/a": "low/b/x_test.go imports middle/a: F1 is above F0",
		"middle/a/x.go: m/middle/b":   "middle/a/x.go imports middle/b: it is not to the left on F1",
		"middle/a/x.go: m/data":       "middle/a/x.go imports data: fixtures are for tests",
		"middle/a/x.go: C":            "middle/a/x.go imports C: there is no cgo in this module",
		"middle/a/x.go: m/nowhere":    "middle/a/x.go imports nowhere: not in the table",
		"data/x.go: m/middle/a":       "data/x.go imports middle/a: fixtures import nothing above F0",
		"data/x_test.go: m/top":       "data/x_test.go imports top: fixtures import nothing above F0",
		"attic/x.go: fmt":             "attic: the package has no floor",
		"top/inner/x_test.go: fmt":    "top/inner: the package has no floor",
	} {
		require.Equal(t, []string{want}, check(t, house, append([]string{line}, sound...)...), line)
	}
	require.Equal(t, []string{"top: has a floor, but there is no such package"},
		check(t, house, append(sound[:5:5], sound[8:]...)...))
}

func TestBrokenTablesAreRefused(t *testing.T) {
	for document, want := range map[string]string{
		"no block": "no block",
		strings.ReplaceAll(house, "```text floors", "```text"):    "no block",
		strings.Replace(house, "\n```\n", "\n", 1):                "no block",
		strings.Replace(house, "F1", "F2", 1):                     `begins with "F2", expected F1`,
		strings.Replace(house, "F1    middle/a", "middle/a", 1):   `begins with "middle/a"`,
		strings.Replace(house, "F2    top", "F2    top low/a", 1): "low/a stands twice",
		"```text floors\nside data\n```":                          "no floors",
	} {
		_, err := parseTable(document)
		require.ErrorContains(t, err, want)
	}
}

func TestUnreadableSourceIsAnError(t *testing.T) {
	tree := module(sound...)
	tree["low/a/broken.go"] = &fstest.MapFile{Data: []byte("packag p")}
	_, _, err := scan(tree, "m")
	require.ErrorContains(t, err, "broken.go")
}
