package main

import (
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func TestArrange(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"value -s12", "value -- -s12"},
		{"value -- -s12", "value -- -s12"},
		{"value -s12 --seed -3 --legs 5", "value --seed=-3 --legs=5 -- -s12"},
		{"value --seed=-3 s12", "value --seed=-3 -- s12"},
		{"value --points - -", "value --points=- -- -"},
		{"--json value --all-routes s12 --digits 5", "value --json --all-routes --digits=5 -- s12"},
		{"value --json -h-x", "value --json -- -h-x"},
		{"value s12 -h", "value --help"},
		{"help value", "value --help"},
		{"help", "--help"},
		{"-h", "--help"},
		{"--help", "--help"},
		{"", "--"},
		{"value -- --seed", "value -- --seed"},
		{"value --legs=4 -- -- -s12", "value --legs=4 -- -- -s12"},
		{"completion bash -x", "completion bash -x"},
		{"-- value s12", "value -- s12"},
	} {
		clean, _, errs := arrange((&program{}).root(), strings.Fields(c.in))
		require.Empty(t, errs, c.in)
		require.Equal(t, c.want, strings.Join(clean, " "), c.in)
	}
}

func TestArrangeFindsMistakes(t *testing.T) {
	for _, c := range []struct{ in, code, message, hint string }{
		{"valu s12", "command", `unknown command "valu"`, "did you mean value?"},
		{"xyzzy --json", "command", `unknown command "xyzzy"`, "commands: certify, conventions"},
		{"-s12", "command", `unknown command "-s12"`, ""},
		{"limit s12 --soft 5", "not-available", "the command limit is not available yet", ""},
		{"value s12 --sed 3", "option", "unknown option --sed of value", "did you mean --seed?"},
		{"value s12 --square-bracket +", "not-available", "--square-bracket is not available yet", ""},
		{"equations --roots 20", "not-available", "--roots is not available yet", ""},
		{"value s12 --seed", "option", "--seed needs a value", ""},
		{"value s12 --seed --json", "option", "--seed needs a value", ""},
		{"value s12 --seed 1 --seed 2", "option", "--seed is given twice", ""},
		{"value s12 --json=true", "option", "--json takes no value", ""},
		{"--legs 5", "option", "unknown option --legs", ""},
	} {
		_, _, errs := arrange((&program{}).root(), strings.Fields(c.in))
		require.Len(t, errs, 1, "%s: %v", c.in, errs)
		require.Equal(t, c.code, errs[0].Code, c.in)
		require.Contains(t, errs[0].Message, c.message, c.in)
		require.Contains(t, errs[0].Hint, c.hint, c.in)
	}
	_, json, errs := arrange((&program{}).root(), strings.Fields("value --json --sed 3 --factors s12"))
	require.True(t, json)
	require.Len(t, errs, 2, "all mistakes are listed together")
}

// Whatever the arguments, those after -- stay as they are and in order, and
// options come out joined.
func TestArrangeKeepsPositionalArguments(t *testing.T) {
	root := (&program{}).root()
	rapid.Check(t, func(t *rapid.T) {
		words := rapid.SliceOf(rapid.SampledFrom([]string{"-s12", "s12", "-", "-x-", "--", "--seed", "-5", "@f", ""})).Draw(t, "words")
		clean, _, errs := arrange(root, append([]string{"value", "--legs", "-4", "--"}, words...))
		require.Empty(t, errs)
		require.Equal(t, append([]string{"value", "--legs=-4", "--"}, words...), clean)
	})
}

func FuzzArrange(f *testing.F) {
	for _, s := range []string{"value -s12 --seed -3", "help", "--json --= -h", "point --legs=5 --out - --"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, line string) {
		arrange((&program{}).root(), strings.Fields(line))
	})
}

func TestNearest(t *testing.T) {
	names := []string{"value", "point", "equations", "residues"}
	require.Equal(t, "value", nearest("vlaue", names))
	require.Equal(t, "residues", nearest("residue", names))
	require.Equal(t, "", nearest("xyz", names))
	require.Equal(t, 1, distance("ab", "ba"))
	require.Equal(t, 3, distance("kitten", "sitting"))
}
