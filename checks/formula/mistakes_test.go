package formula

import (
	"fmt"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

// Every mistake: its code, line and column.
func TestMistakes(t *testing.T) {
	long := strings.Repeat("9", MaxDigits+1)
	for _, c := range []struct{ text, code, place string }{
		{"", "empty", "1:1"},
		{"  ", "empty", "1:3"},
		{"s12+", "syntax", "1:5"},
		{"s12+*s13", "syntax", "1:5"},
		{"(s12", "unbalanced", "1:5"},
		{"s12)", "unbalanced", "1:4"},
		{"s12\n+)", "syntax", "2:2"},
		{"s12/s13 s14", "ambiguous", "1:4"},
		{"1/2 s14", "ambiguous", "1:2"},
		{"s12^s13", "exponent", "1:5"},
		{"s12^1/2 + s12^(1/2)", "exponent", "1:15"},
		{"s12^1001", "exponent", "1:5"},
		{"s12^1000000000", "exponent", "1:5"},
		{"2^3^4", "ambiguous", "1:4"},
		{"((2^1000)^1000)^1000", "too-large", "1:2"},
		{"s11", "repeated-leg", "1:1"},
		{"s(1,1)", "repeated-leg", "1:5"},
		{"s1", "leg", "1:1"},
		{"s10", "leg", "1:1"},
		{"s(1)", "leg", "1:1"},
		{"s(0,1)", "leg", "1:3"},
		{"s(1,65)", "leg", "1:5"},
		{"s(1,2", "unbalanced", "1:6"},
		{"s(1,x)", "leg", "1:5"},
		{"s (1,2)", "call", "1:1"},
		{"x", "unknown-name", "1:1"},
		{"BS(1,2,3,4)", "amplitude", "1:1"},
		{"BS{1,2,3,4|1,2,3,4}", "amplitude", "1:1"},
		{"BS(1,2,3,4|1,2,3)", "legs", "1:1"},
		{"BS(1,2,3,4|1,2,3,4,5)", "orderings", "1:1"},
		{"BS(1,2,3,4|1,2,3,5)", "leg", "1:18"},
		{"BS(1,2,3,3|1,2,3,4)", "repeated-leg", "1:10"},
		{"phi3(1,2,3)", "legs", "1:1"},
		{"phi3(1,2,3,4|1,2,3,4)", "amplitude", "1:1"},
		{"phi3(1+,2,3,4)", "not-available", "1:7"},
		{"<1 2>", "not-available", "1:1"},
		{"2 ⟨12⟩", "not-available", "1:3"},
		{"[1 2]", "not-available", "1:1"},
		{"s12*k1.k2", "not-available", "1:5"},
		{"e1.k2", "not-available", "1:1"},
		{"f1.e2", "not-available", "1:1"},
		{"tr5(1,2,3,4)", "not-available", "1:1"},
		{"3+i", "not-available", "1:3"},
		{"YM(1-,2-,3+,4+)", "not-available", "1:1"},
		{"GR(1,2,3,4)", "not-available", "1:1"},
		{"NLSM(1,2,3,4)", "not-available", "1:1"},
		{"gluons2{1,2,3,4}", "not-available", "1:1"},
		{"z3", "integrand", "1:1"},
		{"PT(1,2,3,4)", "integrand", "1:1"},
		{"0.25", "decimal", "1:1"},
		{long, "number", "1:1"},
		{"s12 § s13", "character", "1:5"},
		{"perms(1,2,3,4,5,6,7,8,9){1}", "too-large", "1:1"},
		{"perms(1,1){1}", "repeated-leg", "1:9"},
		{"perms(1,2) 3", "syntax", "1:12"},
		{"cyclic{s12", "unbalanced", "1:11"},
		{"cyclic(s12)", "call", "1:1"},
		{"s12 loop", "define", "1:5"},
		{"bad", "unknown-name", "1:1"},
		{strings.Repeat("(", 100000), "too-deep", ""},
		{strings.Repeat("-", 100000) + "1", "too-deep", ""},
		{"s12**2", "syntax", "1:5"},
		{"*s12", "syntax", "1:1"},
		{"^2", "syntax", "1:1"},
		{"(,)", "syntax", "1:2"},
		{"{s12}", "syntax", "1:1"},
		{"cyclic{}", "syntax", "1:8"},
		{"s12.s13", "syntax", "1:4"},
		{"1,000", "syntax", "1:2"},
		{"s12]", "unbalanced", "1:4"},
		{"(s12]", "unbalanced", "1:5"},
		{"cyclic{s12)", "unbalanced", "1:11"},
		{"phi3{1,2,3,4", "unbalanced", "1:13"},
		{"s12/-s13 s14", "ambiguous", "1:4"},
		{"s12/s13(s14)", "ambiguous", "1:4"},
		{"s12/s13/s14 s15", "ambiguous", "1:8"},
		{"s12^1.5", "exponent", "1:5"},
		{"s12^-(2)", "exponent", "1:5"},
		{"s12^()", "exponent", "1:5"},
		{"s()", "leg", "1:3"},
		{"s(1,2,)", "leg", "1:7"},
		{"s(1,,2)", "leg", "1:5"},
		{"s(1 2)", "leg", "1:5"},
		{"s(1,-2)", "leg", "1:5"},
		{"s(1.5,2)", "leg", "1:4"},
		{"s(1,2|3)", "leg", "1:6"},
		{"msq65", "leg", "1:1"},
		{"phi3(1,2,3,4;5)", "leg", "1:13"},
		{"BS(1,2,3,4|1,2,3,4)+s(1,5)", "leg", "1:21"},
		{"BS(1,2,3,4|1,2,3,4)+phi3(1,2,3,4,5)", "legs", "1:21"},
		{"perms(1,5){phi3(1,2,3,4)}", "leg", "1:1"},
		{"s{1,2}", "call", "1:1"},
		{"s[1,2]", "call", "1:1"},
		{"BS", "call", "1:1"},
		{"BS (1,2,3,4|1,2,3,4)", "call", "1:1"},
		{"perms (1,2){s12}", "call", "1:1"},
		{"z (3,4)", "integrand", "1:1"},
		{"<1|2+3|4]", "not-available", "1:1"},
		{"[1|2+3|4>", "not-available", "1:1"},
		{"<1|(2+3)(4+5)|6>^2", "not-available", "1:1"},
		{"[1|(2+3)(4+5)|6]/s12", "not-available", "1:1"},
		{"2\u2329 1 2 \u232a", "not-available", "1:2"},
		{"\u30081 2\u3009", "not-available", "1:1"},
		{"k1.(k2+k3)", "not-available", "1:1"},
		{"2e1.k2", "not-available", "1:2"},
		{"EYM(1-,2-,3+;4+)", "not-available", "1:1"},
		{"YMS(5+,4,3,1,2|1,2,3,4)", "not-available", "1:1"},
		{"YM (1-,2-,3+,4+)", "not-available", "1:1"},
		{"BI(1-,2-,3+,4+)", "not-available", "1:1"},
		{"sGal(1,2,3,4)", "not-available", "1:1"},
		{"abs2(YM(1-,2-,3+,4+))", "not-available", "1:1"},
		{"Nc^2", "not-available", "1:1"},
		{".5", "decimal", "1:1"},
		{"1.", "decimal", "1:1"},
		{"s12+2.5e3", "decimal", "1:5"},
		{"1e9", "decimal", "1:1"},
		{"s12 = s13", "character", "1:5"},
		{"s12−s13", "character", "1:4"},
		{"phi", "unknown-name", "1:1"},
		{"s12s23", "unknown-name", "1:1"},
		{"s_12", "unknown-name", "1:1"},
		{"s12\r\n + é", "character", "2:4"},
		{strings.Repeat(" ", MaxText) + "1", "too-large", "1:1"},
		{"s12\xff", "encoding", "1:4"},
		{"s12\n+\xe2\x9f", "encoding", "2:2"},
	} {
		f, errs := Parse(c.text, ParseOptions{Defines: map[string]string{"loop": "1+ring", "ring": "loop", "bad": "s12+nothing"}})
		name := shorten(c.text)
		require.Nil(t, f, name)
		require.NotEmpty(t, errs, name)
		require.Equal(t, c.code, errs[0].Code, "%s: %s", name, errs[0])
		if c.code == "not-available" {
			require.Contains(t, errs[0].Message, "not available yet")
			require.Len(t, errs, 1, "%s: nothing but what is not available is reported", name)
		}
		if c.place != "" {
			require.Equal(t, c.place, fmt.Sprintf("%d:%d", errs[0].Line, errs[0].Column), name)
		}
		require.NotEmpty(t, errs[0].Message)
	}
}

// All mistakes of a text are listed, each where the text stands in its file.
func TestAllMistakesAreListed(t *testing.T) {
	_, errs := Parse("s11 + x*\n(s12^s3 + BS(1,2,3,4))", ParseOptions{File: "claims.toml", Line: 7, Column: 12})
	require.Len(t, errs, 4)
	require.Equal(t, "claims.toml:7:12: leg 1 stands twice in the invariant (repeated-leg)", errs[0].String())
	require.Equal(t, "claims.toml:7:18: unknown name \"x\" (unknown-name)", errs[1].String())
	require.Equal(t, 8, errs[2].Line)
	require.Equal(t, 6, errs[2].Column)
	require.Equal(t, "amplitude", errs[3].Code)
	require.Contains(t, errs[1].Text(), "^")
}

// One mistake gives one diagnostic: what follows it is read as if it were not
// there, so that a second mistake behind it is found.
func TestRecovery(t *testing.T) {
	for _, bad := range []string{
		"s(1,,2)", "s(1 2 3)", "s(a,b)", "s()", "s(1,2|3)", "s[1,2]", "s{1,2}", "s (1,2)", "BS(1,2,3,4|1 2 3 4)", "BS(,1|2|3)", "BS(1,2,3,4,|1,2,3,4)",
		"BS(1-,2-,3+,4+|1,2,3,4)", "phi3{1,2,3,4)", "cyclic {s12}", "perms (1,2){s12}", "perms(1,1){s12}", "(,)", "(s12 ; s13)", "(s12]", "{s12}", "sqrt(s12)", "s12**2",
		"s12^()", "s12^(s13+1)", "s12^x", "s12^1.5", "2^3^4", "1.5", "2.5e3", "s12.s13", "s12)))", "s12/s13 s14", "YM(1-,2-,3+,4+)", "YM (1,2)", "<1|2+3|4]", "[1|(2+3)(4+5)|6]",
		"k1.k2", "e1.(k2+k3)", "tr5(1,2,3,4)", "abs2(EYM(1,2,3;4))", "s12²", "s12 == s13 ",
	} {
		_, errs := Parse(bad+" + wrong", ParseOptions{})
		require.Len(t, errs, 2, "%s: %v", bad, errs)
		require.Equal(t, `unknown name "wrong"`, errs[1].Message, bad)
		require.Equal(t, len([]rune(bad))+4, errs[1].Column, bad)
	}
}

func TestMistakesAreMarked(t *testing.T) {
	_, errs := Parse("1 + s12/s13 s14", ParseOptions{})
	require.Equal(t, "1:8: a divisor is followed by another factor: this could mean s12/(s13 s14) or (s12/s13) s14 (ambiguous)\n"+
		"  1 + s12/s13 s14\n         ^~~~~~~~\n  hint: write s(1,2)/(s(1,3)*s(1,4)) or (s(1,2)/s(1,3))*s(1,4)", errs[0].Text())
	_, errs = Parse("a/-b c", ParseOptions{Defines: map[string]string{"a": "1", "b": "2", "c": "3"}})
	require.Contains(t, errs[0].Message, "a/(-b c) or (a/-b) c")
	require.Equal(t, "write a/(-b c) or (a/-b) c", errs[0].Hint, "a definition is not written out in a hint")
	_, errs = Parse("cylic{s12}", ParseOptions{})
	require.Contains(t, errs[0].Hint, "did you mean cyclic?")
	_, errs = Parse("0.25", ParseOptions{})
	require.Equal(t, "write 1/4", errs[0].Hint)
	_, errs = Parse("s12 − s13", ParseOptions{})
	require.Equal(t, "write -", errs[0].Hint)
}

// A flood of mistakes is cut off, and so is one formula that is nothing else.
func TestErrorsAreLimited(t *testing.T) {
	_, errs := Parse(strings.Repeat("x + ", 1000)+"x", ParseOptions{})
	require.Len(t, errs, maxErrors)
}

func TestLocatedText(t *testing.T) {
	// every character stands on a line of its own
	_, errs := Parse("s12+x", ParseOptions{File: "f", Locate: func(offset int) (int, int) { return offset + 1, 1 }})
	require.Equal(t, "f:5:1: unknown name \"x\" (unknown-name)", errs[0].String())
	f, errs := Parse("s12+s13", ParseOptions{Locate: func(offset int) (int, int) { return 3, 10 + 2*offset }})
	require.Empty(t, errs)
	require.Equal(t, Span{"", 3, 18, 3}, f.Root.(*Binary).R.Span())
}

// Sums of many terms do not nest: neither reading, printing, relabelling nor
// evaluating them takes more stack than a short one.
func TestLongFormulas(t *testing.T) {
	const terms = 200_000
	text := strings.Repeat("s12-", terms-1) + "s12"
	f, errs := Parse(text, ParseOptions{})
	require.Empty(t, errs)
	v, err := evaluate(t, text, ParseOptions{})
	require.NoError(t, err)
	require.Equal(t, fmt.Sprint(2*(2-terms)), v.RatString())
	n, err := Relabel(f.Root, []int{2, 3, 4, 5, 1})
	require.NoError(t, err)
	require.Equal(t, strings.Repeat("s(2,3)-", terms-1)+"s(2,3)", n.String())
	_, errs = Parse("x"+strings.Repeat("(", 1<<20)+strings.Repeat("{", 1<<20), ParseOptions{})
	require.NotEmpty(t, errs)
}

func TestByteOrderMark(t *testing.T) {
	f, errs := Parse("\ufeffs12", ParseOptions{})
	require.Empty(t, errs)
	require.Equal(t, "s12", f.Text)
	require.Equal(t, 1, f.Root.Span().Column)
}
