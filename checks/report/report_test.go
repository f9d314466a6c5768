package report

import (
	"bytes"
	"encoding/json"
	"math/big"
	"os/exec"
	"regexp"
	"strings"
	"testing"
	"time"

	"eliminant/checks/claim"
	"eliminant/checks/diag"
	"eliminant/rational/kinematics"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func rat(s string) *big.Rat {
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		panic(s)
	}
	return r
}

// fourLegs is the point s12 = s34 = 2, s23 = s14 = 3, s13 = s24 = -5.
func fourLegs(label string) *kinematics.Point {
	return &kinematics.Point{Label: label, Kind: kinematics.KindInvariants, S: kinematics.NewMatrix([][]*big.Rat{
		{rat("0"), rat("2"), rat("-5"), rat("3")},
		{rat("2"), rat("0"), rat("3"), rat("-5")},
		{rat("-5"), rat("3"), rat("0"), rat("2")},
		{rat("3"), rat("-5"), rat("2"), rat("0")},
	})}
}

// documents has one of every kind, with everything filled in that can be.
func documents() map[string]Document {
	return map[string]Document{
		"value": &Value{Formula: "BS(1,2,3,4|1,3,2,4)", Decimals: true, Values: []*claim.PointValue{
			{Point: "p1", Value: rat("-1/3"), Agree: true, Routes: []claim.RouteValue{
				{Route: "recursion", Value: rat("-1/3"), Proof: "bound", Elapsed: 1500 * time.Microsecond},
				{Route: "elimination", Reason: "s25 = 0", Elapsed: time.Second},
			}, Skipped: []claim.Skip{{Route: "groebner", Reason: "too many legs"}}},
			{Point: "p2", Agree: true, Routes: []claim.RouteValue{{Route: "recursion", Reason: "pole"}}},
		}},
		"residues": &Residues{Integrand: "1/J", Values: []Residue{
			{Point: "p1", Value: rat("0"), Proof: "bound", Primes: 1, Elapsed: time.Millisecond},
			{Point: "p2", Value: rat("5/7"), Proof: "agreement", Primes: 3, Ordering: []int{1, 3, 2, 4}},
			{Point: "p3", Reason: "s13 = 0"},
		}},
		"equations": &Equations{Eliminants: true, Points: []PointEquations{
			{Point: "p1", Legs: 4, Solutions: 1, Polynomials: []string{"-5*z3+2"},
				Eliminant: &Eliminant{Variable: "z3", Monic: []*big.Rat{rat("-2/5"), rat("1")}, Proof: "bound", Primes: 1}},
			{Point: "p2", Legs: 4, Solutions: 1, Polynomials: []string{"2"}, Ordering: []int{1, 2, 3, 4}, Reason: "s13 = 0", Vanishing: []string{"s13"}},
		}},
		"verdicts": &Verdicts{Report: &claim.Report{Title: "Check", Claims: []claim.Result{
			{Name: "good", Verdict: claim.Certified, FalseAcceptance: "2^-118", Rounds: 2, Routes: []string{"recursion", "elimination"}},
			{Name: "at a point", Verdict: claim.Certified, FalseAcceptance: "0", Rounds: 1, Routes: []string{"formula"}},
			{Name: "wrong", Verdict: claim.Refuted, FalseAcceptance: "0", Rounds: 1, Reason: "the two sides differ at an exact point",
				Counterexample: &claim.Counterexample{Point: fourLegs("it's"), Formulas: [2]string{"s12", "-s23"}, Sides: [2]string{"2", "-3"}, Ratio: "-2/3"}},
			{Name: "zero", Verdict: claim.Refuted, FalseAcceptance: "0", Rounds: 1, Reason: "the two sides differ at an exact point",
				Counterexample: &claim.Counterexample{Point: fourLegs("c"), Formulas: [2]string{"s12", "0"}, Sides: [2]string{"2", "0"}}},
			{Name: "open", Verdict: claim.Undecided, Reason: "s13 = 0"},
			{Name: "late"},
		}}},
		"error": &Fault{Diagnostics: diag.List{{Code: "leg", Message: "leg 9 out of range", File: "f", Line: 2, Column: 3, Hint: "legs are 1..4", Source: "x s19"}},
			Detail: map[string]string{"b": "2", "a": "1"}},
	}
}

func both(t *testing.T, d Document, s Style) (text, document string) {
	t.Helper()
	var a, b bytes.Buffer
	require.NoError(t, d.WriteText(&a, s))
	require.NoError(t, d.WriteJSON(&b))
	return a.String(), b.String()
}

func TestDocumentsAreDeterministicAndTimeless(t *testing.T) {
	for name, d := range documents() {
		_, first := both(t, d, Style{})
		_, second := both(t, documents()[name], Style{})
		require.Equal(t, first, second, name)
		require.True(t, json.Valid([]byte(first)), name)
		require.NotContains(t, strings.ToLower(first), "elapsed", name)
		var generic map[string]any
		require.NoError(t, json.Unmarshal([]byte(first), &generic))
		require.Equal(t, "eliminant/"+name+"/1", generic["format"])
	}
}

func TestColourAddsNothingToTheWords(t *testing.T) {
	escape := regexp.MustCompile("\x1b\\[[0-9;]*m")
	for name, d := range documents() {
		plain, _ := both(t, d, Style{})
		coloured, _ := both(t, d, Style{Colour: true})
		require.NotContains(t, plain, "\x1b", name)
		require.Contains(t, coloured, "\x1b", name)
		require.Equal(t, plain, escape.ReplaceAllString(coloured, ""), name)
	}
}

func TestVerdictsText(t *testing.T) {
	text, document := both(t, documents()["verdicts"], Style{})
	lines := strings.Split(text, "\n")
	require.Equal(t, "Check", lines[0])
	require.Regexp(t, `^certified  good        false acceptance < 2\^-118 in 2 rounds +recursion \+ elimination  `, lines[2])
	require.Regexp(t, `^certified  at a point  exact at 1 point +formula`, lines[3])
	require.Regexp(t, `^refuted    wrong       the two sides differ`, lines[4])
	require.Contains(t, text, "    left   s12 = 2\n    right  -s23 = -3\n    ratio  -2/3\n")
	require.Contains(t, text, "undecided  open        s13 = 0")
	require.NotContains(t, text, "late", "a claim without a verdict is only counted")
	require.Contains(t, text, "6 claims: 2 certified, 2 refuted, 1 undecided, 1 not finished\n")
	require.Contains(t, document, `"unfinished": ["late"]`)
	require.Contains(t, document, `"summary": {
    "certified": 2,
    "refuted": 2,
    "undecided": 1
  }`)
}

// The command printed for a side hands the program exactly the point and the
// formula, whatever characters are in them.
func TestReproduceSurvivesTheShell(t *testing.T) {
	for _, label := range []string{"p1", "it's", `back\slash $HOME "quoted"`, "`x`"} {
		formula := "s12 - s23*2 /* '"
		command, err := Reproduce("program", formula, fourLegs(label))
		require.NoError(t, err)
		script := `program() { printf '%s|' "$@"; cat; }` + "\n" + command
		out, err := exec.Command("sh", "-c", script).CombinedOutput()
		require.NoError(t, err, string(out))
		prefix := "value|" + formula + "|--points|-|"
		require.True(t, strings.HasPrefix(string(out), prefix), string(out))
		points, err := kinematics.ReadPoints(strings.NewReader(strings.TrimPrefix(string(out), prefix)), "")
		require.NoError(t, err)
		require.True(t, points[0].Equal(fourLegs(label)))
	}
}

func TestReproduceOfALongFormulaUsesAFile(t *testing.T) {
	formula := strings.Repeat("s12+", 30000) + "s12"
	command, err := Reproduce("", formula, fourLegs("p1"))
	require.NoError(t, err)
	require.Contains(t, command, " > side.formula; ")
	require.True(t, strings.HasSuffix(command, "| eliminant value @side.formula --points -"))
}

func TestPolynomialText(t *testing.T) {
	for want, coefficients := range map[string][]string{
		"z3^2-4*z3+15/4": {"15/4", "-4", "1"},
		"-z3^3+z3":       {"0", "1", "0", "-1"},
		"-1/2*z3-1":      {"-1", "-1/2"},
		"0":              {"0"},
	} {
		var c []*big.Rat
		for _, s := range coefficients {
			c = append(c, rat(s))
		}
		require.Equal(t, want, polynomial("z3", c))
	}
}

func TestLongEliminantHasALineAPower(t *testing.T) {
	e := &Eliminant{Variable: "z3", Proof: "bound"}
	for range 30 {
		e.Monic = append(e.Monic, rat("123456789/1234567"))
	}
	text, _ := both(t, &Equations{Eliminants: true, Points: []PointEquations{{Eliminant: e}}}, Style{})
	require.Contains(t, text, "  z3^29 123456789/1234567\n")
	require.Contains(t, text, "  z3^0  123456789/1234567\n")
}

// Joining rows changes white space outside strings only, and leaves no array of
// scalars on several lines.
func TestJoinRowsKeepsTheDocument(t *testing.T) {
	var value func(depth int) *rapid.Generator[any]
	value = func(depth int) *rapid.Generator[any] {
		options := []*rapid.Generator[any]{
			rapid.Map(rapid.String(), func(s string) any { return s }),
			rapid.Map(rapid.SampledFrom([]string{"[", "]", "{\"a\": [1,\n 2]}", "\\", "\"", "<&>"}), func(s string) any { return s }),
			rapid.Map(rapid.Int(), func(i int) any { return i }),
			rapid.Just[any](nil),
		}
		if depth > 0 {
			options = append(options,
				rapid.Map(rapid.SliceOfN(value(depth-1), 0, 4), func(l []any) any { return l }),
				rapid.Map(rapid.MapOfN(rapid.String(), value(depth-1), 0, 3), func(m map[string]any) any { return m }))
		}
		return rapid.OneOf(options...)
	}
	rapid.Check(t, func(t *rapid.T) {
		v := value(4).Draw(t, "document")
		var b, plain, compact bytes.Buffer
		require.NoError(t, writeJSON(&b, v))
		require.NoError(t, json.Compact(&compact, b.Bytes()))
		e := json.NewEncoder(&plain)
		e.SetEscapeHTML(false)
		require.NoError(t, e.Encode(v))
		require.Equal(t, strings.TrimSpace(plain.String()), compact.String())
		require.NotRegexp(t, `(?m)^ *\[\n( *-?[0-9]+,?\n)+ *\]`, b.String())
	})
}

func TestDuration(t *testing.T) {
	for want, d := range map[string]time.Duration{
		"3 µs": 3 * time.Microsecond, "1.5 ms": 1500 * time.Microsecond, "2.35 s": 2346 * time.Millisecond, "2m5s": 125 * time.Second,
	} {
		require.Equal(t, want, duration(d))
	}
}

func TestFaultText(t *testing.T) {
	text, _ := both(t, documents()["error"], Style{})
	require.Equal(t, "error: f:2:3: leg 9 out of range (leg)\n  x s19\n    ^\n  hint: legs are 1..4\n  a: 1\n  b: 2\n", text)
}
