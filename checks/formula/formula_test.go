package formula

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"strings"
	"testing"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func ExampleParse() {
	f, errs := Parse("cyclic{1/(s12 s34)}", ParseOptions{})
	fmt.Println(f, len(errs))
	_, errs = Parse("s12/s23 s13 + BS(1,2,3,4|1,2,3)", ParseOptions{})
	for _, d := range errs {
		fmt.Println(d)
	}
	// Output:
	// cyclic{1/(s(1,2)*s(3,4))} 0
	// 1:4: a divisor is followed by another factor: this could mean s12/(s23 s13) or (s12/s23) s13 (ambiguous)
	// 1:15: an ordering of 3 legs, at least 4 are needed (legs)
}

// point5 has planar invariants 2, 3, 5, 7, 11: s12 = 2, s45 = 3, s23 = 5, s15 = 7,
// s34 = 11.
func point5(t require.TestingT) *kinematics.Invariants {
	pairs := map[[2]int]int64{{1, 2}: 2, {4, 5}: 3, {2, 3}: 5, {1, 5}: 7, {3, 4}: 11}
	at := func(a, b int) int64 { return pairs[[2]int{min(a, b), max(a, b)}] }
	// s_{a,a+2} = s_{a+3,a+4} - s_{a,a+1} - s_{a+1,a+2}
	for a := range 5 {
		b, c, d, e := (a+1)%5, (a+2)%5, (a+3)%5, (a+4)%5
		v := at(d+1, e+1) - at(a+1, b+1) - at(b+1, c+1)
		pairs[[2]int{min(a, c) + 1, max(a, c) + 1}] = v
	}
	s := make([][]*big.Rat, 5)
	for a := range s {
		s[a] = make([]*big.Rat, 5)
		for b := range s[a] {
			s[a][b] = new(big.Rat)
			if a != b {
				s[a][b].SetInt64(at(a+1, b+1))
			}
		}
	}
	v, err := kinematics.NewInvariants(s, nil)
	require.NoError(t, err)
	return v
}

// evaluate gives amplitudes the value 1000.
func evaluate(t require.TestingT, text string, o ParseOptions) (*big.Rat, error) {
	f, errs := Parse(text, o)
	require.Empty(t, errs, text)
	d := NewRationalDomain(point5(t), func(*Amplitude) (*big.Rat, error) { return big.NewRat(1000, 1), nil })
	return Evaluate(context.Background(), f, 5, d)
}

func TestValues(t *testing.T) {
	defines := map[string]string{"A": "s12+1", "B": "A^2/2"}
	for text, want := range map[string]string{
		"s12":                         "2",
		"s(2,1)":                      "2",
		"s123":                        "3",
		"s(1,2,3)":                    "3",
		"-s12":                        "-2",
		"+s12":                        "2",
		"-s12^2":                      "-4",
		"(-s12)^2":                    "4",
		"s12^-1":                      "1/2",
		"s12^(-2)":                    "1/4",
		"s12^0":                       "1",
		"3/7":                         "3/7",
		"1/2/3":                       "1/6",
		"1-2-3":                       "-4",
		"2*-3":                        "-6",
		"2+3*4":                       "14",
		"s12 s23":                     "10",
		"2s12":                        "4",
		"2 s12^2 s23":                 "40",
		"s12 s23/s34":                 "10/11",
		"s12*s23/s34":                 "10/11",
		"s12/(s23 s34)":               "2/55",
		"s12 (3)":                     "6",
		"s12(3)":                      "6",
		"(1)(2)(3)":                   "6",
		"msq":                         "0",
		"msq3":                        "0",
		"A":                           "3",
		"2A":                          "6",
		"-A":                          "-3",
		"s12 A^2":                     "18",
		"B":                           "9/2",
		"cyclic{s12}":                 "28",
		"cyclic{1}":                   "5",
		"perms(1,2){s13}":             "1",
		"perms(2,3){s12}":             "-2",
		"perms(1){7}":                 "7",
		"perms(1,2,3){1}":             "6",
		"cyclic{perms(1,2){1}}":       "10",
		"BS(1,2,3,4,5|1,2,3,4,5)":     "1000",
		"phi3(1,2,3,4,5)/2":           "500",
		"phi3{1,2,3,4,5}":             "1000",
		" 1 \n + 1 ":                  "2",
		"cyclic{1/(s12 s34)}":         "74/231",
		"cyclic{ 1 / ( s12 s34 ) }^2": "5476/53361",
	} {
		v, err := evaluate(t, text, ParseOptions{Defines: defines})
		require.NoError(t, err, text)
		require.Equal(t, want, v.RatString(), text)
	}
}

func TestIntegrands(t *testing.T) {
	for text, bare := range map[string]bool{
		"PT(1,2,3,4,5)^2/detPhi": false, "z(3,4) PT(1,2)": false, "z3^2/J": true, "s12 z3": true,
	} {
		f, errs := Parse(text, ParseOptions{Integrand: true})
		require.Empty(t, errs)
		require.Equal(t, bare, f.Bare())
		again, errs := Parse(f.String(), ParseOptions{Integrand: true})
		require.Empty(t, errs)
		require.Equal(t, f.String(), again.String())
	}
	for text, code := range map[string]string{
		"z(3)": "leg", "z(3,3)": "repeated-leg", "PT(1)": "legs", "BS(1,2,3,4|1,2,3,4)": "integrand", "Pf(Psi)": "not-available", "z99": "leg",
	} {
		_, errs := Parse(text, ParseOptions{Integrand: true})
		require.NotEmpty(t, errs, text)
		require.Equal(t, code, errs[0].Code, text)
	}
}

// drawNode makes random trees of scalar formulas.
func drawNode(t *rapid.T, depth int) Node {
	kinds := 5
	if depth > 0 {
		kinds = 10
	}
	legs := func(n int) []int {
		return rapid.Permutation([]int{1, 2, 3, 4, 5}).Draw(t, "legs")[:n]
	}
	switch rapid.IntRange(0, kinds-1).Draw(t, "kind") {
	case 0, 1:
		return &Invariant{Legs: legs(rapid.IntRange(2, 3).Draw(t, "count"))}
	case 2:
		return &Number{Value: big.NewRat(rapid.Int64Range(0, 99).Draw(t, "number"), 1)}
	case 3:
		return &MassSquared{Leg: rapid.IntRange(0, 5).Draw(t, "leg")}
	case 4:
		o := make([][]Leg, 2)
		for i := range o {
			for _, l := range legs(5) {
				o[i] = append(o[i], Leg{Label: l})
			}
		}
		if rapid.Bool().Draw(t, "cubic") {
			return &Amplitude{Theory: "phi3", Orderings: o[:1], Braces: rapid.Bool().Draw(t, "braces")}
		}
		return &Amplitude{Theory: "BS", Orderings: o}
	case 5:
		return &Minus{X: drawNode(t, depth-1)}
	case 6:
		return &Power{Base: drawNode(t, depth-1), Exponent: rapid.IntRange(-3, 3).Draw(t, "exponent")}
	case 7:
		if rapid.Bool().Draw(t, "cyclic") {
			return &Cyclic{Body: drawNode(t, depth-1)}
		}
		return &Perms{Legs: legs(2), Body: drawNode(t, depth-1)}
	}
	op := "+-*/"[rapid.IntRange(0, 3).Draw(t, "op")]
	return &Binary{Op: op, L: drawNode(t, depth-1), R: drawNode(t, depth-1)}
}

// same compares trees without their places.
func same(a, b Node) bool {
	switch a := a.(type) {
	case *Minus:
		b, ok := b.(*Minus)
		return ok && same(a.X, b.X)
	case *Binary:
		b, ok := b.(*Binary)
		return ok && a.Op == b.Op && same(a.L, b.L) && same(a.R, b.R)
	case *Power:
		b, ok := b.(*Power)
		return ok && a.Exponent == b.Exponent && same(a.Base, b.Base)
	case *Cyclic:
		b, ok := b.(*Cyclic)
		return ok && same(a.Body, b.Body)
	case *Perms:
		b, ok := b.(*Perms)
		return ok && commas(a.Legs) == commas(b.Legs) && same(a.Body, b.Body)
	}
	return fmt.Sprintf("%T", a) == fmt.Sprintf("%T", b) && a.String() == b.String()
}

func TestPrintedFormulasParseToTheSameTree(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := drawNode(t, 4)
		f, errs := Parse(n.String(), ParseOptions{})
		require.Empty(t, errs, n.String())
		require.True(t, same(n, f.Root), "%s parses as %s", n, f)
	})
}

// The same formula over Q and modulo a prime: reduction commutes with
// evaluation.
func TestDomainsAgree(t *testing.T) {
	p := point5(t)
	rapid.Check(t, func(t *rapid.T) {
		f := &Formula{Root: drawNode(t, 3)}
		field := prime.NewSource("domains", rapid.String().Draw(t, "seed")).Field()
		r, err := p.Reduce(field)
		require.NoError(t, err)
		amplitude := func(a *Amplitude) *big.Rat {
			return big.NewRat(int64(len(a.String()))+7*int64(a.Orderings[0][0].Label), 3)
		}
		exact, errQ := Evaluate(context.Background(), f, 5, NewRationalDomain(p, func(a *Amplitude) (*big.Rat, error) { return amplitude(a), nil }))
		modular, errP := Evaluate(context.Background(), f, 5, NewModularDomain(r, func(a *Amplitude) (prime.Element, error) {
			v, _ := field.FromRat(amplitude(a))
			return v, nil
		}))
		var zero *DivisionByZero
		if errQ != nil {
			require.ErrorAs(t, errQ, &zero)
			require.ErrorAs(t, errP, &zero)
			return
		}
		require.NoError(t, errP)
		want, ok := field.FromRat(exact)
		require.True(t, ok)
		require.Equal(t, want, modular)
	})
}

func TestEvaluationErrors(t *testing.T) {
	_, err := evaluate(t, "1/(s12-2)", ParseOptions{})
	var zero *DivisionByZero
	require.ErrorAs(t, err, &zero)
	require.Equal(t, "s(1,2)-2", zero.Text)
	require.Equal(t, 4, zero.At.Column)
	_, err = evaluate(t, "cyclic{1/(s12-5)}", ParseOptions{})
	require.ErrorAs(t, err, &zero)
	require.Equal(t, "s(2,3)-5", zero.Text, "the divisor is named with its legs relabelled")
	_, err = evaluate(t, "(s12-2)^-1", ParseOptions{})
	require.ErrorAs(t, err, &zero)
	_, err = evaluate(t, "s(1,6)", ParseOptions{})
	var leg *LegError
	require.ErrorAs(t, err, &leg)
	require.Equal(t, 6, leg.Leg)
	_, err = evaluate(t, "perms(1,2,3,4,5,6,7,8){perms(1,2,3,4,5){cyclic{s12}}}", ParseOptions{})
	var size *SizeError
	require.ErrorAs(t, err, &size)
	stop, cancel := context.WithCancelCause(context.Background())
	why := errors.New("stop")
	cancel(why)
	f, _ := Parse("cyclic{s12}", ParseOptions{})
	_, err = Evaluate(stop, f, 5, NewRationalDomain(point5(t), nil))
	require.ErrorIs(t, err, why)
}

func TestLegs(t *testing.T) {
	for text, want := range map[string]string{
		"s12": "2 false", "s(1,7)+msq3": "7 false", "BS(1,2,3,4,5|1,2,3,4,5)+s12": "5 true", "cyclic{s12}": "2 false", "1": "0 false",
	} {
		f, errs := Parse(text, ParseOptions{})
		require.Empty(t, errs)
		n, tells := f.Legs()
		require.Equal(t, want, fmt.Sprint(n, " ", tells), text)
	}
	require.True(t, Reserved("s12"))
	require.True(t, Reserved("YM"))
	require.False(t, Reserved("MHV5"))
}

func TestDimensions(t *testing.T) {
	dimension := func(text string) (Dimension, *DimensionMismatch) {
		f, errs := Parse(text, ParseOptions{})
		require.Empty(t, errs)
		d := &DimensionDomain{}
		v, err := Evaluate(context.Background(), f, 5, d)
		require.NoError(t, err)
		return v, d.Mismatch
	}
	v, m := dimension("s12^2/msq + 0")
	require.Equal(t, 2, v.Value)
	require.Nil(t, m)
	v, m = dimension("phi3(1,2,3,4,5) - cyclic{1/(s12 s34)}")
	require.Equal(t, -4, v.Value)
	require.Nil(t, m)
	_, m = dimension("s12 + s12^2")
	require.Equal(t, &DimensionMismatch{2, 4}, m)
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"s12", "cyclic{1/(s12 s34)}", "BS(1,2,3,4|1,3,2,4)", "perms(2,3){s12}^-2", "a/b c", "((", "z(3,4)/J", "⟨12⟩", "1e9", "A A", "\n*", "s12/-s13 s14", "<1|(2+3)(4+5)|6>", "k1.(k2+k3)", "2.5e3", "(s12]", "BS(,1|2|3)"} {
		f.Add(s, false)
		f.Add(s, true)
	}
	f.Fuzz(func(t *testing.T, text string, integrand bool) {
		o := ParseOptions{Integrand: integrand, Defines: map[string]string{"A": "s12+B", "B": "2"}}
		x, errs := Parse(text, o)
		if x == nil {
			require.NotEmpty(t, errs)
			for _, d := range errs {
				require.NotEmpty(t, d.Text())
			}
			return
		}
		again, errs := Parse(x.String(), o)
		require.Empty(t, errs, "%q printed as %q", text, x)
		require.True(t, same(x.Root, again.Root), "%q printed as %q", text, x)
	})
}

func BenchmarkParse(b *testing.B) {
	text := strings.Repeat("(s12+s(1,2,3))^2/(s23 s34) - 7 BS(1,2,3,4|1,3,2,4) + ", 20000) + "0"
	b.SetBytes(int64(len(text)))
	for b.Loop() {
		_, errs := Parse(text, ParseOptions{})
		require.Empty(b, errs)
	}
}
