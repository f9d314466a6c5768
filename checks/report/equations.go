package report

import (
	"fmt"
	"io"
	"math/big"
	"strconv"
	"strings"
	"time"
)

// Equations is the document of the polynomial scattering equations,
// "eliminant/equations/1".
type Equations struct {
	Points     []PointEquations
	Eliminants bool // eliminants were asked for
}

// PointEquations are the equations at one point, in the gauge z_1 = infinity,
// z_2 = 1, z_n = 0.
type PointEquations struct {
	Point       string
	Legs        int
	Solutions   int64 // (n-3)!
	Polynomials []string
	Eliminant   *Eliminant // nil if not asked for, or undecided
	Reason      string     // why the eliminant is undecided
	Vanishing   []string   // invariants that vanish: solutions coincide or escape
	Ordering    []int      // massive legs: the ordering the matrix is shifted along
}

// Eliminant is the characteristic polynomial of one puncture.
type Eliminant struct {
	Variable string
	Monic    []*big.Rat // coefficients of the powers 0, 1, ..., (n-3)!
	Proof    string
	Primes   int
	Elapsed  time.Duration
}

type equationsDocument struct {
	Format string           `json:"format"`
	Points []pointEquations `json:"points"`
}

type pointEquations struct {
	Point       string          `json:"point"`
	Legs        int             `json:"legs"`
	Solutions   int64           `json:"solutions"`
	Ordering    []int           `json:"ordering,omitempty"`
	Polynomials []string        `json:"polynomials"`
	Eliminant   *eliminantValue `json:"eliminant"`
	Reason      string          `json:"reason"`
	Vanishing   []string        `json:"vanishing"`
}

type eliminantValue struct {
	Variable string   `json:"variable"`
	Monic    []string `json:"monic"`
	Proof    string   `json:"proof"`
}

// WriteJSON writes the document; eliminant is null where it was not asked for
// or is undecided.
func (e *Equations) WriteJSON(w io.Writer) error {
	out := equationsDocument{Format: "eliminant/equations/1", Points: []pointEquations{}}
	for _, p := range e.Points {
		v := pointEquations{Point: p.Point, Legs: p.Legs, Solutions: p.Solutions, Ordering: p.Ordering,
			Polynomials: p.Polynomials, Reason: p.Reason, Vanishing: p.Vanishing}
		if v.Vanishing == nil {
			v.Vanishing = []string{}
		}
		if p.Eliminant != nil {
			v.Eliminant = &eliminantValue{p.Eliminant.Variable, []string{}, p.Eliminant.Proof}
			for _, c := range p.Eliminant.Monic {
				v.Eliminant.Monic = append(v.Eliminant.Monic, c.RatString())
			}
		}
		out.Points = append(out.Points, v)
	}
	return writeJSON(w, out)
}

// WriteText writes the polynomials, one a line, and the eliminant.
func (e *Equations) WriteText(w io.Writer, s Style) error {
	var b strings.Builder
	for i, p := range e.Points {
		if i > 0 {
			b.WriteByte('\n')
		}
		fmt.Fprintf(&b, "%s\n", s.paint(bold, fmt.Sprintf("%s: %d legs, %s", p.Point, p.Legs, count(int(p.Solutions), "solution"))))
		if p.Ordering != nil {
			fmt.Fprintf(&b, "masses: s_ab shifted along the ordering %s\n", legList(p.Ordering))
		}
		fmt.Fprintf(&b, "gauge z1 = infinity, z2 = 1, z%d = 0\n", p.Legs)
		for m, h := range p.Polynomials {
			fmt.Fprintf(&b, "  h%d = %s\n", m+1, h)
		}
		if len(p.Vanishing) > 0 {
			fmt.Fprintf(&b, "%s %s = 0: solutions coincide or escape\n", s.paint(yellow, "degenerate:"), strings.Join(p.Vanishing, " = "))
		}
		switch {
		case p.Eliminant != nil:
			writeEliminant(&b, p.Eliminant)
		case e.Eliminants:
			fmt.Fprintf(&b, "eliminant %s: %s\n", s.paint(yellow, "undecided"), p.Reason)
		}
	}
	_, err := io.WriteString(w, b.String())
	return err
}

// longLine is how many characters of an eliminant are printed on one line.
const longLine = 200

func writeEliminant(b *strings.Builder, e *Eliminant) {
	fmt.Fprintf(b, "eliminant of %s, degree %d, proof: %s, %s  (%s)\n", e.Variable, len(e.Monic)-1, e.Proof, count(e.Primes, "prime"), duration(e.Elapsed))
	line := polynomial(e.Variable, e.Monic)
	if len(line) <= longLine {
		fmt.Fprintf(b, "  %s\n", line)
		return
	}
	for i := len(e.Monic) - 1; i >= 0; i-- {
		fmt.Fprintf(b, "  %s %s\n", pad(e.Variable+"^"+strconv.Itoa(i), len(e.Variable)+len(strconv.Itoa(len(e.Monic)-1))+1), e.Monic[i].RatString())
	}
}

// polynomial writes coefficients, lowest first, like "z3^2-2/3*z3+1".
func polynomial(variable string, coefficients []*big.Rat) string {
	var b strings.Builder
	for i := len(coefficients) - 1; i >= 0; i-- {
		c := coefficients[i]
		if c.Sign() == 0 {
			continue
		}
		if b.Len() > 0 && c.Sign() > 0 {
			b.WriteByte('+')
		}
		power := variable
		switch i {
		case 0:
			b.WriteString(c.RatString())
			continue
		case 1:
		default:
			power += "^" + strconv.Itoa(i)
		}
		switch {
		case c.IsInt() && c.Num().IsInt64() && c.Num().Int64() == 1:
		case c.IsInt() && c.Num().IsInt64() && c.Num().Int64() == -1:
			b.WriteByte('-')
		default:
			b.WriteString(c.RatString() + "*")
		}
		b.WriteString(power)
	}
	if b.Len() == 0 {
		return "0"
	}
	return b.String()
}
