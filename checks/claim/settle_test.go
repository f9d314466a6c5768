package claim

import (
	"context"
	"errors"
	"fmt"
	"testing"

	"eliminant/checks/amplitude"
	"eliminant/checks/diag"
	"eliminant/checks/formula"
	"eliminant/rational/kinematics"
	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
)

func Example() {
	file := &File{Title: "Four legs", Seed: "1", Bits: 100}
	parse := func(text string) *formula.Formula {
		f, _ := formula.Parse(text, formula.ParseOptions{})
		return f
	}
	file.Claims = []Claim{
		{Name: "planar", Kind: "equal", Legs: 4, Sides: [2]*formula.Formula{parse("phi3(1,2,3,4)"), parse("1/s12+1/s23")}},
		{Name: "one diagram short", Kind: "equal", Legs: 4, Sides: [2]*formula.Formula{parse("phi3{1,2,3,4}"), parse("1/s12+1/s23")}},
	}
	report, _ := Settle(context.Background(), file, Options{})
	for _, r := range report.Claims {
		fmt.Println(r.Name, r.Verdict, r.Rounds)
	}
	// Output:
	// planar certified 2
	// one diagram short refuted 1
}

func settleText(t testing.TB, text string) []Result {
	f, err := load(t, text)
	require.NoError(t, err)
	r, err := Settle(context.Background(), f, Options{Jobs: 2})
	require.NoError(t, err)
	return r.Claims
}

// checkCounterexample evaluates the printed sides again, at the point read back
// from its document.
func checkCounterexample(t *testing.T, r Result) {
	x := r.Counterexample
	require.NotNil(t, x, r.Name)
	require.NotEqual(t, x.Sides[0], x.Sides[1])
	for i, text := range x.Formulas {
		f, errs := formula.Parse(text, formula.ParseOptions{})
		require.Empty(t, errs)
		for _, all := range []bool{false, true} {
			v, err := ComputeValue(context.Background(), f, x.Point, ValueOptions{AllRoutes: all})
			require.NoError(t, err)
			require.True(t, v.Agree)
			require.Equal(t, x.Sides[i], v.Value.RatString(), "%s: %s", r.Name, text)
		}
	}
}

func identityText(n int, last ...int) string {
	o := make([]int, n)
	for i := range o {
		o[i] = i + 1
	}
	copy(o[n-len(last):], last)
	return commas(o)
}

// The relations hold for BS (second ordering), with and without masses, and the
// misuses of them are refuted (conventions: reflection of phi3 has sign +,
// decoupling and Kleiss-Kuijf fail for phi3).
func TestRelations(t *testing.T) {
	holds := map[string]bool{
		"BS cyclicity": true, "BS reflection": true, "BS u1-decoupling": true, "BS kleiss-kuijf": true, "BS bcj": true, "BS routes": true, "BS moebius": true,
		"phi3 cyclicity": true, "phi3 reflection": true, "phi3 u1-decoupling": false, "phi3 kleiss-kuijf": false, "phi3 bcj": false, "phi3 routes": true, "phi3 moebius": true,
	}
	for n := 4; n <= 7; n++ {
		text := ""
		var want []bool
		for _, mass := range []string{"", "masses_squared = \"free\"\n", "masses_squared = \"-7/3\"\n"} {
			for _, relation := range Relations() {
				for theory, of := range map[string]string{
					"BS":   "BS(" + identityText(n) + "|" + identityText(n, n-2, n, n-1) + ")",
					"phi3": "phi3(" + identityText(n) + ")",
				} {
					text += fmt.Sprintf("[[claim]]\nname = \"%d\"\nrelation = %q\nof = %q\n%s", len(want), relation, of, mass)
					want = append(want, holds[theory+" "+relation])
				}
			}
		}
		for i, r := range settleText(t, text) {
			if want[i] {
				require.Equal(t, Certified, r.Verdict, "n = %d, %s, claim %d: %+v", n, r.Kind, i, r)
				require.NotEmpty(t, r.FalseAcceptance)
				continue
			}
			require.Equal(t, Refuted, r.Verdict, "n = %d, %s, claim %d", n, r.Kind, i)
			checkCounterexample(t, r)
		}
	}
}

// Misuses that look true: each refuted, with a counterexample that value
// confirms.
func TestMisuses(t *testing.T) {
	for _, c := range []string{
		// both orderings moved
		`equal = ["BS(2,1,3,4|2,1,3,4)+BS(2,3,1,4|2,3,1,4)+BS(2,3,4,1|2,3,4,1)", "0"]`,
		// massive fundamental relation with 2 k.k in place of the shifted s_ab
		`equal = ["(s12-2msq)*BS(1,2,3,4|2,1,3,4)+(s12+s13-4msq)*BS(1,2,3,4|2,3,1,4)", "0"]
		masses_squared = "3"`,
		// wrong sign of the diagonal
		`equal = ["phi3(1,2,3,4)", "BS(1,2,3,4|1,2,3,4)"]`,
		// a wrong ordering
		`equal = ["BS(1,2,3,4,5|1,3,2,4,5)", "BS(1,2,3,4,5|1,2,4,3,5)"]`,
		// a wrong mass
		`equal = ["phi3(1,2,3,4)", "1/(s12-2msq)+1/(s23-msq)"]
		masses_squared = "2"`,
		// a missing diagram
		`equal = ["phi3(1,2,3,4,5)", "1/(s12 s34)+1/(s23 s45)+1/(s34 s15)+1/(s45 s12)"]`,
		// a wrong mass dimension
		`equal = ["phi3(1,2,3,4)", "1/s12^2+1/s23^2"]`,
		// off by one part in 10^40
		`equal = ["s12", "(1+1/10^40) s12"]
		legs = 4`,
		// kinematics of four massless legs used with masses
		`equal = ["s12+s13+s23", "0"]
		masses_squared = "free"
		legs = 4`,
	} {
		r := settleText(t, "[[claim]]\nname = \"a\"\n"+c+"\n")[0]
		require.Equal(t, Refuted, r.Verdict, c)
		checkCounterexample(t, r)
	}
}

// With masses BS(a|b) is the sum of the diagrams planar in both orderings with
// propagators 1/(P^2 - m^2), symmetric in a and b: decoupling holds in the first
// ordering too, although the matrix of the equations is shifted along it.
func TestFirstOrderingOfMassiveBS(t *testing.T) {
	for _, sides := range []string{
		`["BS(2,1,3,4,5|1,2,3,4,5)+BS(2,3,1,4,5|1,2,3,4,5)+BS(2,3,4,1,5|1,2,3,4,5)+BS(2,3,4,5,1|1,2,3,4,5)", "0"]`,
		`["BS(1,2,3,4,5|1,3,2,4,5)", "BS(1,3,2,4,5|1,2,3,4,5)"]`,
	} {
		r := settleText(t, "[[claim]]\nname = \"a\"\nequal = "+sides+"\nmasses_squared = \"free\"\n")[0]
		require.Equal(t, Certified, r.Verdict)
	}
}

func TestReasonNamesDimensions(t *testing.T) {
	r := settleText(t, "[[claim]]\nname = \"a\"\nequal = [\"phi3(1,2,3,4)\", \"1/s12^2+1/s23^2\"]\n")[0]
	require.Contains(t, r.Reason, "mass dimensions -2 and -4")
}

// True at the given point only: certified there, refuted over "any".
func TestTrueAtOnePoint(t *testing.T) {
	f, err := Load(write(t, "claims.toml", `
[[claim]]
name = "there"
equal = ["s12 s23", "6"]
points = "points.json"
[[claim]]
name = "everywhere"
equal = ["s12 s23", "6"]
legs = 4
[[claim]]
name = "false there"
equal = ["s12 s23", "7"]
points = "points.json"
[[claim]]
name = "pole there"
equal = ["1/(s12-2)", "0"]
points = "points.json"
`, "points.json", pointX4))
	require.NoError(t, err)
	r, err := Settle(context.Background(), f, Options{})
	require.NoError(t, err)
	require.Equal(t, Certified, r.Claims[0].Verdict)
	require.Equal(t, "0", r.Claims[0].FalseAcceptance)
	require.Equal(t, Refuted, r.Claims[1].Verdict)
	checkCounterexample(t, r.Claims[1])
	require.Equal(t, Refuted, r.Claims[2].Verdict)
	checkCounterexample(t, r.Claims[2])
	require.Equal(t, Undecided, r.Claims[3].Verdict)
	require.Contains(t, r.Claims[3].Reason, "s(1,2)-2")
	require.Equal(t, Summary{1, 2, 1}, r.Summary)
}

// A divisor that vanishes identically is an error of the input.
func TestIdenticallyZeroDivisor(t *testing.T) {
	for _, text := range []string{"1/0", "1/(s12-s12)", "1/(s12+s13+s14)", "(s12-s34)^-1"} {
		f, err := load(t, "[[claim]]\nname = \"a\"\nequal = [\""+text+"\", \"0\"]\nlegs = 4\n")
		require.NoError(t, err)
		_, err = Settle(context.Background(), f, Options{})
		var list diag.List
		require.ErrorAs(t, err, &list, text)
		require.Equal(t, "division-by-zero", list[0].Code)
		require.Equal(t, 1, list[0].Line)
	}
}

// The report does not depend on the number of jobs.
func TestJobs(t *testing.T) {
	text := ""
	for i := range 12 {
		text += fmt.Sprintf("[[claim]]\nname = \"%d\"\nequal = [\"phi3(1,2,3,4,5)\", \"cyclic{1/(s12 s34)}+%d\"]\n", i, i%3)
	}
	f, err := load(t, text)
	require.NoError(t, err)
	var first *Report
	for jobs := 1; jobs <= 3; jobs++ {
		done := 0
		r, err := Settle(context.Background(), f, Options{Jobs: jobs, Progress: func(n, total int, _ string) {
			done++
			require.Equal(t, done, n)
			require.Equal(t, 12, total)
		}})
		require.NoError(t, err)
		require.Equal(t, 12, done)
		for i := range r.Claims {
			r.Claims[i].Elapsed = 0
		}
		if first == nil {
			first = r
		}
		require.Equal(t, first, r)
	}
	require.Equal(t, Summary{4, 8, 0}, first.Summary)
	f.Seed = "2"
	other, err := Settle(context.Background(), f, Options{})
	require.NoError(t, err)
	require.NotEqual(t, first.Claims[1].Counterexample.Point, other.Claims[1].Counterexample.Point, "another seed draws other points")
}

func TestStricterBoundTakesMoreRounds(t *testing.T) {
	claim := "[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4\n"
	few := settleText(t, "false_acceptance = \"2^-50\"\n"+claim)[0]
	many := settleText(t, "false_acceptance = \"2^-1000\"\n"+claim)[0]
	require.Equal(t, 1, few.Rounds)
	require.Greater(t, many.Rounds, 16)
}

func TestCancelled(t *testing.T) {
	f, err := load(t, "[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4\n")
	require.NoError(t, err)
	stop, cancel := context.WithCancelCause(context.Background())
	why := errors.New("stop")
	cancel(why)
	r, err := Settle(stop, f, Options{})
	require.ErrorIs(t, err, why)
	require.Empty(t, r.Claims[0].Verdict)
	require.Equal(t, "a", r.Claims[0].Name)
}

// A route that lies is found out by the witness at the first point, and ends
// the run as an internal failure, not as a verdict.
func TestLyingRoute(t *testing.T) {
	for _, kind := range []string{"equal", "routes"} {
		f, err := load(t, "[[claim]]\nname = \"a\"\nequal = [\"phi3(1,2,3,4,5)\", \"cyclic{1/(s12 s34)}\"]\n")
		require.NoError(t, err)
		c := &f.Claims[0]
		c.Kind, c.Of = kind, c.Sides[0]
		for _, lying := range []amplitude.Route{amplitude.Recursion, amplitude.Elimination, amplitude.Series} {
			if lying == amplitude.Series && kind != "routes" {
				continue // not asked there
			}
			s, err := newTest(f, c)
			require.NoError(t, err)
			r := s.engine.requests[0]
			honest, err := amplitude.NewKernel(r, lying)
			require.NoError(t, err)
			s.engine.kernels[string(lying)+" "+r.String()] = func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
				v, err := honest(ctx, p)
				return p.Field.Neg(v), err
			}
			_, err = s.everywhere(context.Background())
			var internal *diag.Internal
			require.ErrorAs(t, err, &internal, "%s, %s", kind, lying)
			require.Contains(t, internal.Message, "disagree")
			require.NotEmpty(t, internal.Detail["prime"])
		}
	}
}

func TestComputeValue(t *testing.T) {
	p := Claim{}
	f, err := Load(write(t, "claims.toml", "[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\npoints = \"p.json\"\n", "p.json", pointX4))
	require.NoError(t, err)
	p = f.Claims[0]
	value := func(text string, o ValueOptions) (*PointValue, error) {
		x, errs := formula.Parse(text, formula.ParseOptions{})
		require.Empty(t, errs)
		return ComputeValue(context.Background(), x, p.Points[0], o)
	}
	v, err := value("BS(1,2,3,4|1,2,3,4)+s12", ValueOptions{AllRoutes: true})
	require.NoError(t, err)
	require.Len(t, v.Routes, 5)
	require.True(t, v.Agree)
	require.Equal(t, "7/6", v.Value.RatString())
	v, err = value("s12^2", ValueOptions{})
	require.NoError(t, err)
	require.Equal(t, "formula", v.Routes[0].Route)
	_, err = value("BS(1,2,3,4|1,2,3,4)", ValueOptions{Routes: []string{"onshell"}})
	var list diag.List
	require.ErrorAs(t, err, &list)
	require.Contains(t, list[0].Hint, "elimination")
	_, err = value("s12", ValueOptions{Routes: []string{"recursion"}})
	require.ErrorAs(t, err, &list)
	_, err = value("phi3(1,2,3,4,5)", ValueOptions{})
	require.ErrorAs(t, err, &list)
	_, err = value("1/(s12-2)", ValueOptions{})
	var stuck *diag.Undecided
	require.ErrorAs(t, err, &stuck)
	require.Equal(t, "s(1,2)-2", stuck.Invariant)
	_, err = value("1/(s12-s34)", ValueOptions{})
	require.ErrorAs(t, err, &list)
	require.Equal(t, "division-by-zero", list[0].Code)
}
