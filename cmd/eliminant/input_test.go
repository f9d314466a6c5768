package main

import (
	"os"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

// bad is one wrong input and what must be said about it.
type bad struct {
	name  string
	files map[string]string
	args  string
	want  []string // parts of what is printed: place, message, hint
}

func points(body string) map[string]string {
	return map[string]string{"p.json": `{"format": "eliminant/points/1", "points": [` + body + `]}`}
}

func claims(text string) map[string]string { return map[string]string{"c.toml": text} }

const (
	atPoint = "value s12 --points p.json"
	settle  = "certify c.toml"
)

var badInputs = []bad{
	{"not JSON", map[string]string{"p.json": "{\n  \"format\" 1}"}, atPoint, []string{"p.json:2:12", "(json)"}},
	{"not TOML", claims("title = \"x\n"), settle, []string{"c.toml:1:", "(toml)"}},
	{"missing points file", nil, atPoint, []string{"p.json", "no such file"}},
	{"missing formula file", nil, "value @f.txt", []string{"f.txt: no such file"}},
	{"unknown key of a point", points(`{"invariant": []}`), atPoint, []string{"p.json:1:", "invariant"}},
	{"unknown format", map[string]string{"p.json": `{"format": "eliminant/points/9", "points": []}`}, atPoint, []string{"p.json:1:12", "(format)"}},
	{"unknown key of a claim", claims("[[claim]]\nname = \"a\"\nequals = [\"s12\", \"s12\"]"), settle, []string{"c.toml:3:1", `unknown key "equals"`, "keys of a claim"}},
	{"unknown table", claims("[[claims]]\nname = \"a\""), settle, []string{"c.toml:1:3", "unknown table"}},
	{"unknown relation", claims("[[claim]]\nname = \"a\"\nrelation = \"kk\"\nof = \"BS(1,2,3,4|1,2,3,4)\""), settle, []string{"c.toml:3:", `unknown relation "kk"`, "kleiss-kuijf"}},
	{"unknown command", nil, "certificate c.toml", []string{"unknown command", "commands: certify"}},
	{"unknown option", nil, "value s12 --point p.json", []string{"unknown option --point", "did you mean --points?"}},
	{"unknown route", nil, "value BS(1,2,3,4|1,2,3,4) --route recurse", []string{`unknown route "recurse"`, "recursion"}},
	{"route that does not apply", nil, "value BS(1,2,3,4,5,6,7,8|1,2,3,4,5,6,7,8) --route groebner", []string{"groebner", "n <= 7", "routes that apply: recursion"}},
	{"unknown theory", nil, "value phi4(1,2,3,4)", []string{"1:1", `unknown name "phi4"`, "phi3()"}},
	{"theory to come", nil, "value YM(1-,2-,3+,4+)", []string{"1:1", "YM is not available yet"}},
	{"brackets to come", nil, "value <12>[12]", []string{"1:1", "not available yet"}},
	{"vectors to come", nil, "value e1.k2", []string{"1:1", "not available yet"}},
	{"leg out of range", nil, "value BS(1,2,3,7|1,2,3,4)", []string{"1:10", "leg 7 out of range"}},
	{"leg of the point out of range", points(good), "value s(1,5) --points p.json", []string{"leg 5", "4 legs"}},
	{"leg repeated", nil, "value BS(1,2,3,3|1,2,3,4)", []string{"1:10", "leg 3"}},
	{"leg repeated in an invariant", nil, "value s(1,2,2)", []string{"1:7", "leg 2"}},
	{"orderings of different legs", nil, "value BS(1,2,3,4|1,2,3,4,5)", []string{"orderings of 4 and 5 legs"}},
	{"one ordering missing", nil, "value BS(1,2,3,4)", []string{"BS takes two orderings"}},
	{"not symmetric", points(`{"invariants": [[0,2,-5,3],[2,0,3,-5],[-5,4,0,2],[3,-5,2,0]]}`), atPoint, []string{"p.json:1:", "(symmetry)"}},
	{"diagonal", points(`{"invariants": [[1,2,-5,3],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}`), atPoint, []string{"p.json:1:", "(diagonal)"}},
	{"row sum", points(`{"invariants": [[0,2,-5,4],[2,0,3,-5],[-5,3,0,2],[4,-5,2,0]]}`), atPoint, []string{"row 1", "1", "(row-sum)"}},
	{"off shell", points(`{"momenta": [[1,1,0,1],[-1,0,1,0],[1,0,0,1],[-1,-1,-1,-2]]}`), atPoint, []string{"leg 1", "(on-shell)"}},
	{"not conserved", points(`{"momenta": [[1,1,0,0],[-1,0,1,0],[1,0,0,1],[-1,0,0,1]]}`), atPoint, []string{"(conservation)"}},
	{"zero denominator in a file", points(`{"invariants": [[0,"1/0",-5,3],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}`), atPoint, []string{"p.json:1:", "(number)"}},
	{"float in a file", points(`{"invariants": [[0,0.5,-5,3],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}`), atPoint, []string{"p.json:1:", "(number)"}},
	{"1/0", nil, "value 1/0 --legs 4", []string{"zero"}},
	{"zero to a negative power", nil, "value (s12-s12)^(-1) --legs 4", []string{""}},
	{"divisor identically zero", nil, "value 1/(s12+s13+s23) --legs 4", []string{"identically zero", "s(1,2)+s(1,3)+s(2,3)"}},
	{"divisor identically zero in a claim", claims("[[claim]]\nname = \"a\"\nequal = [\"1/(s12-s34)\", \"0\"]\nlegs = 4"), settle, []string{"c.toml:1", "identically zero"}},
	{"long number", nil, "value " + strings.Repeat("7", 5000), []string{"1:1", "4096"}},
	{"long number in a file", points(`{"invariants": [[0,"` + strings.Repeat("7", 5000) + `",-5,3],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}`), atPoint, []string{"p.json:1:", "4096"}},
	{"three legs", nil, "value BS(1,2,3|1,2,3)", []string{"3 legs", "4"}},
	{"three legs to draw", nil, "point --legs 3", []string{"--legs must be an integer from 4 to 64"}},
	{"three legs in a file", points(`{"invariants": [[0,0,0],[0,0,0],[0,0,0]]}`), atPoint, []string{"(legs)"}},
	{"too many legs of an amplitude", nil, "value BS(" + legList(25) + "|" + legList(25) + ")", []string{"25 legs", "24"}},
	{"too many legs of a residue sum", nil, "residues 1/J --legs 11 --kind invariants", []string{"10 legs"}},
	{"empty claims file", claims(""), settle, []string{"c.toml:1:1", "no claims", "[[claim]]"}},
	{"duplicate names", claims("[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4\n[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4"), settle, []string{"c.toml:6:", `"a" is taken by the claim at line 1`}},
	{"unwritable output", nil, "point --legs 4 --out missing/out.json", []string{"missing/out.json", "cannot be written"}},
	{"unwritable folder", claims("[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4"), settle + " --out c.toml/x", []string{"c.toml/x", "cannot be written to"}},
	{"deep nesting", nil, "value " + strings.Repeat("(", 1000) + "s12" + strings.Repeat(")", 1000), []string{"1:40", "nesting deeper than 400"}},
	{"large exponent", nil, "value s12^100000", []string{"1:5", "1000"}},
	{"tower of exponents", nil, "value ((2^1000)^1000)^1000", []string{""}},
	{"many terms", nil, "value perms(1,2,3,4,5,6,7,8){perms(1,2,3,4,5,6,7,8){s12}} --legs 8", []string{"terms"}},
	{"family", map[string]string{"p.json": `{"format": "eliminant/points/1", "points": [{"invariants": [[0,["2","1"],["-5","-1"],3],[["2","1"],0,3,["-5","-1"]],[["-5","-1"],3,0,["2","1"]],[3,["-5","-1"],["2","1"],0]]}]}`}, atPoint, []string{"point p1 is a family"}},
	{"ambiguous division", map[string]string{"f": "s12/s13 s23"}, "value @f --legs 4", []string{"f:1:", "s(1,2)/(s(1,3)*s(2,3)) or (s(1,2)/s(1,3))*s(2,3)"}},
	{"formula and points from stdin", nil, "value - --points -", []string{"cannot be both the formula and the points"}},
	{"different masses in a claim", map[string]string{"p.json": `{"format": "eliminant/points/1", "points": [` + differentMasses + `]}`,
		"c.toml": "[[claim]]\nname = \"a\"\nequal = [\"phi3(1,2,3,4)\", \"0\"]\npoints = \"p.json\""}, settle, []string{"one mass common to all legs"}},
	{"msq of different masses", points(differentMasses), "value msq --points p.json", []string{"mass"}},
	{"empty formula", nil, "value @empty", []string{"empty"}},
	{"no formula", nil, "value", []string{"value needs a formula", "for instance"}},
	{"two formulas", nil, "value s12 + s13", []string{"takes 1 arguments, found 3", "quotes"}},
	{"single dash", nil, "value s12 -legs 4", []string{"options have two dashes", "--legs"}},
	{"count", nil, "point --legs 4 --count 0", []string{"--count must be an integer from 1 to"}},
	{"seed", nil, "point --legs 4 --seed x", []string{"--seed must be an integer"}},
	{"kind", nil, "point --legs 4 --kind spinor", []string{"did you mean spinors?"}},
	{"mass", nil, "point --legs 4 --masses-squared 0.5", []string{"--masses-squared"}},
	{"jobs", nil, "value s12 --jobs 0", []string{"--jobs must be an integer from 1"}},
	{"digits", nil, "value s12 --digits 0", []string{"--digits must be an integer from 1"}},
	{"different masses", points(differentMasses), "value phi3(1,2,3,4) --points p.json", []string{"one mass common to all legs"}},
	{"integrand of wrong weight", nil, "residues PT(1,2,3,4)", []string{"weight 2 in leg 1"}},
	{"puncture in a formula", nil, "value z3", []string{"1:1", "residues takes integrands"}},
}

// good is a valid point of four legs.
const good = `{"invariants": [[0,2,-5,3],[2,0,3,-5],[-5,3,0,2],[3,-5,2,0]]}`

// differentMasses is a valid point with masses squared 8, 8, 3, 1.
const differentMasses = `{"momenta": [[3,0,0,1],[-3,0,1,0],[2,1,0,0],[-2,-1,-1,-1]], "masses_squared": [8,8,3,1]}`

func legList(n int) string {
	var b strings.Builder
	for i := 1; i <= n; i++ {
		if i > 1 {
			b.WriteByte(',')
		}
		for _, d := range []int{i / 10, i % 10} {
			if d > 0 || i >= 10 {
				b.WriteByte(byte('0' + d))
			}
		}
	}
	return b.String()
}

// Every wrong input ends with exit code 2, a message with place and hint on
// stderr, nothing on stdout, and with --json a valid error document.
func TestBadInput(t *testing.T) {
	for _, b := range badInputs {
		t.Run(b.name, func(t *testing.T) {
			folder := t.TempDir()
			t.Chdir(folder)
			require.NoError(t, os.WriteFile("empty", nil, 0o666))
			for name, content := range b.files {
				require.NoError(t, os.WriteFile(name, []byte(content), 0o666))
			}
			before := entries(t, folder)
			o := try(t, "", strings.Fields(b.args)...)
			require.Equal(t, exitInput, o.code, o.stdout+o.stderr)
			require.Empty(t, o.stdout)
			for _, w := range b.want {
				require.Contains(t, o.stderr, w)
			}
			o = try(t, "", append(strings.Fields(b.args), "--json")...)
			require.Equal(t, exitInput, o.code)
			require.NoError(t, validate(schemaFile("error"), []byte(o.stdout)), o.stdout)
			require.Equal(t, before, entries(t, folder), "nothing is written")
		})
	}
}

// All errors of the input are listed together, before any work.
func TestErrorsAreListedTogether(t *testing.T) {
	folder := t.TempDir()
	t.Chdir(folder)
	require.NoError(t, os.WriteFile("p.json", []byte(`{"format": "eliminant/points/1", "points": [{"invariants": []}]}`), 0o666))
	o := try(t, "", "value", "s1 + BS(1,2,3,9|1,2,3,4)", "--points", "p.json", "--digits", "x", "--route", "nope", "--json")
	require.Equal(t, exitInput, o.code)
	var document struct {
		Diagnostics []struct{ Code, File string }
	}
	o.into(t, &document)
	found := map[string]bool{}
	for _, d := range document.Diagnostics {
		found[d.Code] = true
	}
	for _, code := range []string{"leg", "option", "route"} {
		require.True(t, found[code], "%s in %v", code, document)
	}
	require.Contains(t, o.stdout, `"file": "p.json"`)
}
