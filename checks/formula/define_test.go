package formula

import (
	"context"
	"fmt"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

func ExampleCheckDefinitions() {
	o := ParseOptions{
		Defines:   map[string]string{"A": "s12+B", "B": "2 A", "s12": "7", "C": "s12+*3"},
		DefinedAt: map[string]Origin{"C": {File: "claims.toml", Line: 4, Column: 6}},
	}
	for _, d := range CheckDefinitions(o) {
		fmt.Println(d)
	}
	// Output:
	// 1:1: the definition of s12 takes a name that belongs to the language (define)
	// 1:1: the definition of A uses itself: A -> B -> A (define)
	// claims.toml:4:10: expected a number, an invariant, an amplitude or "(", found "*" (syntax)
}

func TestDefinitions(t *testing.T) {
	f, errs := Parse("2 A/B + A", ParseOptions{Defines: map[string]string{"A": "s12+s23", "B": "A^2", "unused": "(("}})
	require.Empty(t, errs)
	require.Equal(t, "2*(s(1,2)+s(2,3))/(s(1,2)+s(2,3))^2+s(1,2)+s(2,3)", strings.Replace(f.String(), "+(s(1,2)+s(2,3))", "+s(1,2)+s(2,3)", 1), "a definition stands in parentheses")

	for _, c := range []struct {
		defines map[string]string
		text    string
		want    string
	}{
		{map[string]string{"A": "A"}, "A", "1:1: the definition of A uses itself: A -> A (define)"},
		{map[string]string{"A": "B", "B": "C", "C": "B"}, "1+A", "1:3: the definition of B uses itself: B -> C -> B (define)"},
		{map[string]string{"s12": "1"}, "s12", "1:1: the definition of s12 takes a name that belongs to the language (define)"},
		{map[string]string{"YM": "1"}, "YM", "1:1: the definition of YM takes a name that belongs to the language (define)"},
		{map[string]string{"A": "s12\n+ x"}, "A", "1:1: in the definition of A, line 2, column 3: unknown name \"x\" (unknown-name)"},
		{map[string]string{"A": "1+B", "B": "1+x"}, "A", "1:1: in the definition of A, column 3: in the definition of B, column 3: unknown name \"x\" (unknown-name)"},
		{map[string]string{"A": "  "}, "A+1", "1:1: in the definition of A, column 3: the formula is empty (empty)"},
		{map[string]string{"A": "x"}, "A + A", "1:1: in the definition of A, column 1: unknown name \"x\" (unknown-name)"},
	} {
		_, errs := Parse(c.text, ParseOptions{Defines: c.defines})
		require.Equal(t, c.want, errs.Error())
	}
	// a mistake in a definition whose place is known is reported there
	_, errs = Parse("A", ParseOptions{File: "f", Defines: map[string]string{"A": "1+\n x"}, DefinedAt: map[string]Origin{"A": {File: "d", Line: 7, Column: 9}}})
	require.Equal(t, "d:8:2: unknown name \"x\" (unknown-name)", errs.Error())
	require.Equal(t, "   x\n   ^", errs[0].Snippet())
}

func TestNamesOfDefinitions(t *testing.T) {
	for _, name := range []string{"", "1a", "_a", "a b", "a-b", "é", "s1", "z3", "k2", "e10", "f1", "msq", "msq2", "phi3", "cyclic", "Nc", "i", "Pf", "J"} {
		errs := CheckDefinitions(ParseOptions{Defines: map[string]string{name: "1"}})
		require.Len(t, errs, 1, name)
		require.Equal(t, "define", errs[0].Code)
	}
	for _, name := range []string{"a", "MHV5", "s", "x_1", "sum", "zeta", "S12", "K1"} {
		if Reserved(name) {
			continue
		}
		require.Empty(t, CheckDefinitions(ParseOptions{Defines: map[string]string{name: "1"}}), name)
	}
}

// Spans of what a definition stands for are those of the definition.
func TestSpansOfDefinitions(t *testing.T) {
	divisor := func(o ParseOptions) Span {
		o.Defines = map[string]string{"A": "1/(s12-2)"}
		f, errs := Parse("5 + A", o)
		require.Empty(t, errs)
		_, err := Evaluate(context.Background(), f, 5, NewRationalDomain(point5(t), nil))
		var zero *DivisionByZero
		require.ErrorAs(t, err, &zero)
		return zero.At
	}
	require.Equal(t, Span{"[define] A", 1, 4, 5}, divisor(ParseOptions{}))
	require.Equal(t, Span{"claims.toml", 3, 14, 5}, divisor(ParseOptions{DefinedAt: map[string]Origin{"A": {File: "claims.toml", Line: 3, Column: 11}}}))
}

// Definitions that double and double are stopped, and so are long chains.
func TestDefinitionsThatExplode(t *testing.T) {
	bomb := map[string]string{"A0": "s12"}
	chain := map[string]string{"A0": "s12"}
	for i := 1; i <= 100; i++ {
		bomb[fmt.Sprint("A", i)] = fmt.Sprintf("A%d A%d", i-1, i-1)
	}
	for i := 1; i <= 100_000; i++ {
		chain[fmt.Sprint("A", i)] = fmt.Sprintf("A%d", i-1)
	}
	_, errs := Parse("A100", ParseOptions{Defines: bomb})
	require.Equal(t, "too-large", errs[0].Code)
	_, errs = Parse("A100000", ParseOptions{Defines: chain})
	require.Equal(t, "too-deep", errs[0].Code)
	_, errs = Parse("A10", ParseOptions{Defines: bomb})
	require.Empty(t, errs)
	deep := map[string]string{"A": strings.Repeat("(", 300) + "1" + strings.Repeat(")", 300)}
	_, errs = Parse("A", ParseOptions{Defines: deep})
	require.Empty(t, errs)
	_, errs = Parse("A+"+strings.Repeat("(", 300)+"A"+strings.Repeat(")", 300), ParseOptions{Defines: deep})
	require.Equal(t, "too-deep", errs[0].Code, "nesting counts through a definition that was read at a shallow place")
}
