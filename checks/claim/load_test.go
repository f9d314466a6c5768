package claim

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"eliminant/checks/diag"

	"github.com/stretchr/testify/require"
)

// write puts files into a fresh folder and returns the path of the first.
func write(t testing.TB, files ...string) string {
	dir := t.TempDir()
	for i := 0; i < len(files); i += 2 {
		require.NoError(t, os.WriteFile(filepath.Join(dir, files[i]), []byte(files[i+1]), 0o600))
	}
	return filepath.Join(dir, files[0])
}

func load(t testing.TB, text string) (*File, error) { return Load(write(t, "claims.toml", text)) }

const pointX4 = `{"format":"eliminant/points/1","points":[{"label":"a","invariants":[[0,2,-5,3],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}]}`

func TestLoad(t *testing.T) {
	path := write(t, "claims.toml", `
title = "Four legs"
seed = -7
false_acceptance = "2^-150"

[define]
A = "1/s12 + 1/s23"
B = "@b.txt"

[[claim]]
name = "written out"
equal = ["phi3(1,2,3,4)", """
   A"""]

[[claim]]
name = "from a file, at a point"
equal = ["@b.txt", 'B']
points = "points.json"

[[claim]]
name = "massive"
relation = "bcj"
of = "BS(1,2,3,4|1,2,4,3)"
masses_squared = "7/2"
legs = 4
space = "any"
`, "b.txt", "s12\n+ s23", "points.json", pointX4)
	f, err := Load(path)
	require.NoError(t, err)
	require.Equal(t, "Four legs", f.Title)
	require.Equal(t, "-7", f.Seed)
	require.Equal(t, 150.0, f.Bits)
	require.Len(t, f.Claims, 3)
	require.Equal(t, "1/s(1,2)+1/s(2,3)", f.Claims[0].Sides[1].String())
	require.Equal(t, "s(1,2)+s(2,3)", f.Claims[1].Sides[1].String())
	require.Len(t, f.Claims[1].Points, 1)
	require.Equal(t, "7/2", f.Claims[2].Masses.Squared.RatString())
	require.Equal(t, 4, f.Claims[2].Legs)
}

// Every mistake in a claims file: its code and the line it stands in.
func TestMistakesInFiles(t *testing.T) {
	claim := "[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4\n"
	for _, c := range []struct {
		text, code string
		line       int
	}{
		{"", "no-claims", 1},
		{"title = \"x\"\n", "no-claims", 1},
		{"not toml", "toml", 1},
		{claim + "legs = 5\n", "toml", 5},
		{"titel = \"x\"\n" + claim, "unknown-key", 1},
		{"title = 3\n" + claim, "type", 1},
		{"seed = \"x\"\n" + claim, "seed", 1},
		{"seed = 99999999999999999999\n" + claim, "toml", 1},
		{"false_acceptance = \"2^100\"\n" + claim, "false-acceptance", 1},
		{"false_acceptance = \"0.5\"\n" + claim, "false-acceptance", 1},
		{"false_acceptance = \"3/2\"\n" + claim, "false-acceptance", 1},
		{"square_bracket = \"+\"\n" + claim, "not-available", 1},
		{"[claim]\nname = \"a\"\n", "table", 1},
		{"[things]\n" + claim, "unknown-table", 1},
		{"[[reference]]\nname = \"a\"\n" + claim, "not-available", 1},
		{"[[claim]]\nequal = [\"s12\", \"s34\"]\nlegs = 4\n", "name", 1},
		{"[[claim]]\nname = \" \"\nequal = [\"s12\", \"s34\"]\nlegs = 4\n", "name", 2},
		{claim + claim, "duplicate-name", 6},
		{"[[claim]]\nname = \"a\"\n", "claim", 1},
		{claim + "relation = \"bcj\"\nof = \"BS(1,2,3,4|1,2,3,4)\"\n", "claim", 5},
		{claim + "of = \"s12\"\n", "claim", 5},
		{claim + "colour = 3\n", "unknown-key", 5},
		{claim + "limit = \"soft\"\n", "not-available", 5},
		{claim + "conditions = [\"e1.k2 = 0\"]\n", "not-available", 5},
		{claim + "space = \"4d\"\n", "not-available", 5},
		{claim + "space = \"5d\"\n", "space", 5},
		{claim + "masses_squared = 0.5\n", "type", 5},
		{claim + "masses_squared = \"1/0\"\n", "number", 5},
		{claim + "points = \"nowhere.json\"\n", "file", 5},
		{claim + "points = 7\n", "type", 5},
		{"[[claim]]\nname = \"a\"\nequal = [\"s12\"]\n", "equal", 3},
		{"[[claim]]\nname = \"a\"\nequal = [\"s12\", 3]\nlegs = 4\n", "type", 3},
		{"[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\n", "legs", 3},
		{"[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 3\n", "legs", 4},
		{"[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s35\"]\nlegs = 4\n", "legs", 3},
		{"[[claim]]\nname = \"a\"\nequal = [\"phi3(1,2,3,4)\", \"phi3(1,2,3,4,5)\"]\n", "legs", 3},
		{"[[claim]]\nname = \"a\"\nequal = [\"s12\",\n  \"s11\"]\nlegs = 4\n", "repeated-leg", 4},
		{"[[claim]]\nname = \"a\"\nequal = [\"@none.txt\", \"s12\"]\nlegs = 4\n", "unreadable", 3},
		{"[define]\nA = \"B\"\nB = \"A\"\n[[claim]]\nname = \"a\"\nequal = [\"A\", \"0\"]\nlegs = 4\n", "define", 6},
		{"[[claim]]\nname = \"a\"\nrelation = \"bcj\"\n", "claim", 3},
		{"[[claim]]\nname = \"a\"\nrelation = \"magic\"\nof = \"phi3(1,2,3,4)\"\n", "relation", 3},
		{"[[claim]]\nname = \"a\"\nrelation = \"klt-inverse\"\nof = \"phi3(1,2,3,4)\"\n", "not-available", 3},
		{"[[claim]]\nname = \"a\"\nrelation = \"bcj\"\nof = \"2*phi3(1,2,3,4)\"\n", "relation", 4},
		{"[[claim]]\nname = \"a\"\nrelation = \"bcj\"\nof = \"phi3{1,2,3,4}\"\n", "relation", 4},
		{"[[claim]]\nname = \"a\"\nrelation = \"moebius\"\nof = \"phi3{1,2,3,4}\"\n", "relation", 4},
		{"[[claim]]\nname = \"a\"\nrelation = \"routes\"\nof = \"s12\"\nlegs = 4\n", "relation", 4},
	} {
		_, err := load(t, c.text)
		var list diag.List
		require.ErrorAs(t, err, &list, c.text)
		require.Equal(t, c.code, list[0].Code, "%s\n%v", c.text, err)
		require.Equal(t, c.line, list[0].Line, "%s\n%v", c.text, err)
		require.Contains(t, list[0].File, "claims.toml")
	}
	_, err := load(t, "\xef\xbb\xbf"+strings.ReplaceAll(claim, "\n", "\r\n"))
	require.NoError(t, err, "a byte order mark and line ends of two characters are no mistakes")
	_, err = Load(filepath.Join(t.TempDir(), "none.toml"))
	require.ErrorAs(t, err, new(diag.List))
}

// All mistakes are reported together, those of points files too.
func TestAllMistakesTogether(t *testing.T) {
	path := write(t, "claims.toml", `
[[claim]]
name = "a"
equal = ["s12 + s11", "x"]
legs = 4
points = "points.json"

[[claim]]
name = "a"
relation = "bcj"
of = "BS(1,2,3,4)"
`, "points.json", `{"format":"eliminant/points/1","points":[{"invariants":[[0,1,2,3],[1,0,3,2],[2,3,0,1],[3,2,1,0]]}]}`)
	_, err := Load(path)
	var list diag.List
	require.ErrorAs(t, err, &list)
	codes := map[string]bool{}
	for _, d := range list {
		codes[d.Code] = true
	}
	require.GreaterOrEqual(t, len(list), 5, "%v", list)
	for _, code := range []string{"repeated-leg", "unknown-name", "duplicate-name", "amplitude"} {
		require.True(t, codes[code], "%s is missing from %v", code, list)
	}
}

func FuzzLoad(f *testing.F) {
	f.Add("title = \"x\"\n[define]\nA = \"s12\"\n[[claim]]\nname = \"a\"\nequal = [\"A\", \"s34\"]\nlegs = 4\n")
	f.Add("[[claim]]\nname = 'a'\nrelation = \"bcj\"\nof = '''\nBS(1,2,3,4|1,2,4,3)'''\nmasses_squared = \"free\"")
	f.Add("seed = 0x10\nfalse_acceptance = \"1/3\"\n[[claim]]\n")
	dir := f.TempDir()
	path := filepath.Join(dir, "claims.toml")
	f.Fuzz(func(t *testing.T, text string) {
		require.NoError(t, os.WriteFile(path, []byte(text), 0o600))
		file, err := Load(path)
		var list diag.List
		if err != nil {
			require.True(t, errors.As(err, &list), "%v", err)
			require.NotEmpty(t, list)
			return
		}
		require.NotEmpty(t, file.Claims, fmt.Sprint(text))
	})
}
