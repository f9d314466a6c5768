package report

import (
	"fmt"
	"io"
	"math/big"
	"strings"
	"time"
)

// Residues is the document of residue sums, "eliminant/residues/1".
type Residues struct {
	Integrand string
	Values    []Residue
}

// Residue is the sum of an integrand over the solutions at one point.
type Residue struct {
	Point    string
	Value    *big.Rat // nil if undecided
	Proof    string   // "bound" or "agreement"
	Primes   int
	Reason   string // why there is no value
	Ordering []int  // massive legs: the ordering the matrix is shifted along
	Elapsed  time.Duration
}

type residuesDocument struct {
	Format    string         `json:"format"`
	Integrand string         `json:"integrand"`
	Values    []residueValue `json:"values"`
}

type residueValue struct {
	Point    string  `json:"point"`
	Value    *string `json:"value"`
	Proof    *string `json:"proof"`
	Reason   string  `json:"reason"`
	Ordering []int   `json:"ordering,omitempty"`
}

// WriteJSON writes the document.
func (r *Residues) WriteJSON(w io.Writer) error {
	out := residuesDocument{Format: "eliminant/residues/1", Integrand: r.Integrand, Values: []residueValue{}}
	for _, v := range r.Values {
		out.Values = append(out.Values, residueValue{v.Point, exact(v.Value), text(v.Proof), v.Reason, v.Ordering})
	}
	return writeJSON(w, out)
}

// WriteText writes a paragraph a point.
func (r *Residues) WriteText(w io.Writer, s Style) error {
	var b strings.Builder
	fmt.Fprintf(&b, "sum over the solutions of %s\n", s.paint(bold, shorten(r.Integrand, 1000)))
	for _, v := range r.Values {
		b.WriteByte('\n')
		if v.Value == nil {
			fmt.Fprintf(&b, "%s: %s: %s\n", v.Point, s.paint(yellow, "undecided"), v.Reason)
			continue
		}
		fmt.Fprintf(&b, "%s = %s\n", v.Point, v.Value.RatString())
		if !v.Value.IsInt() {
			fmt.Fprintf(&b, "%s ~ %s\n", strings.Repeat(" ", len([]rune(v.Point))), Decimal(v.Value, s.digits()))
		}
		fmt.Fprintf(&b, "  proof: %s, %s  (%s)\n", v.Proof, count(v.Primes, "prime"), duration(v.Elapsed))
		if v.Ordering != nil {
			fmt.Fprintf(&b, "  masses: s_ab shifted along the ordering %s\n", legList(v.Ordering))
		}
	}
	_, err := io.WriteString(w, b.String())
	return err
}

// legList writes "1,2,3".
func legList(legs []int) string {
	return strings.ReplaceAll(strings.Trim(fmt.Sprint(legs), "[]"), " ", ",")
}
