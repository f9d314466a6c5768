package integrand

import (
	"fmt"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"
)

// ReducedPfaffian is Pf'Psi of all legs with the polarisations e of Products.
type ReducedPfaffian struct{ Products *Products }

// Check checks the products.
func (x ReducedPfaffian) Check(f *prime.Field, legs int) error {
	return x.Products.check(f, legs, nil)
}

// Moebius returns 2.
func (x ReducedPfaffian) Moebius(int) int { return 2 }

// Weight returns |I| - 1: the leading block Psi_I has the null vector
// (1,..,1; 0), so its corank is at least 2.
func (x ReducedPfaffian) Weight(set scattering.Channel) int { return set.Size() - 1 }

// Growth returns floor(n/2) - 1, the largest number of entries k.k in a term.
func (x ReducedPfaffian) Growth(legs int) int { return legs/2 - 1 }

// Evaluator takes out rows and columns 1 and n of the k block. What is left of
// leg 1 is a constant row, put first:
//
//	Pf'Psi = - Pf Psi(e_1, k_2..k_{n-1}, e_2..e_n)
//
// where (-1)^(1+n) is the sign of the definition and (-1)^n that of moving e_1.
func (x ReducedPfaffian) Evaluator(r *Ring, legs int) Evaluator {
	rows := []psiRow{{1, true}}
	for a := 2; a < legs; a++ {
		rows = append(rows, psiRow{a, false})
	}
	for a := 2; a <= legs; a++ {
		rows = append(rows, psiRow{a, true})
	}
	return newPsiEvaluator(r, x.Products, legs, rows, true)
}

// SubsetPfaffian is Pf Psi_H, the full Pfaffian over the legs H with rows
// (k_H, e_H); the sums C_aa run over all legs.
type SubsetPfaffian struct {
	Products *Products
	Legs     []int
}

// Check checks the legs and their products.
func (x SubsetPfaffian) Check(f *prime.Field, legs int) error {
	if err := checkLegs("a Pfaffian over a subset", x.Legs, legs, 0); err != nil {
		return err
	}
	return x.Products.check(f, legs, append([]int{}, x.Legs...))
}

// Moebius returns 2 for the legs of the subset.
func (x SubsetPfaffian) Moebius(leg int) int {
	for _, a := range x.Legs {
		if a == leg {
			return 2
		}
	}
	return 0
}

// Weight returns the number of legs of H in the set, less 1 if the set contains
// legs of H only.
func (x SubsetPfaffian) Weight(set scattering.Channel) int {
	w := 0
	for _, a := range x.Legs {
		if set.Has(a) {
			w++
		}
	}
	if w == set.Size() && w > 0 {
		w--
	}
	return w
}

// Growth returns floor(h/2).
func (x SubsetPfaffian) Growth(int) int { return len(x.Legs) / 2 }

// Evaluator returns an evaluator of the Pfaffian, rows k_H before rows e_H.
func (x SubsetPfaffian) Evaluator(r *Ring, legs int) Evaluator {
	var rows []psiRow
	for _, polarised := range []bool{false, true} {
		for _, a := range x.Legs {
			rows = append(rows, psiRow{a, polarised})
		}
	}
	return newPsiEvaluator(r, x.Products, legs, rows, false)
}

// psiRow names a row of Psi: k_leg or e_leg.
type psiRow struct {
	leg       int
	polarised bool
}

type psiEvaluator struct {
	ring     *Ring
	products *Products
	legs     int
	rows     []psiRow
	negative bool
	matrix   *Antisymmetric
	half     prime.Element
}

func newPsiEvaluator(r *Ring, p *Products, legs int, rows []psiRow, negative bool) *psiEvaluator {
	half, _ := r.field.Inv(r.field.FromInt64(2))
	return &psiEvaluator{r, p, legs, rows, negative, NewAntisymmetric(r, len(rows)), half}
}

func (e *psiEvaluator) Evaluate(z []prime.Element, v *Solution) {
	for i, x := range e.rows {
		for j, y := range e.rows[i+1:] {
			e.entry(e.matrix.Entry(i, i+1+j), v, x, y)
		}
	}
	e.ring.Pfaffian(z, e.matrix)
	e.ring.raise(z, 0, e.negative)
}

// entry sets z to the entry of Psi in row x and column y, times z_1 for each of
// them that belongs to leg 1.
func (e *psiEvaluator) entry(z []prime.Element, v *Solution, x, y psiRow) {
	r, f, n := e.ring, e.ring.field, e.legs
	a, b := x.leg, y.leg
	if a == b {
		e.diagonal(z, v, a)
		if !x.polarised { // row k, column e: -C_aa
			r.negate(z)
		}
		return
	}
	g := v.Inverse(a, b)
	i, j := (a-1)*n+b-1, (b-1)*n+a-1
	switch {
	case x.polarised && y.polarised: // B_ab
		f.ScaleRow(z, e.products.EE[i], g)
	case x.polarised: // C_ab
		f.ScaleRow(z, e.products.EK[i], g)
	case y.polarised: // -C_ba = e_b.k_a/z_ab
		f.ScaleRow(z, e.products.EK[j], g)
	default: // A_ab, k_a.k_b = s_ab/2
		r.MulLinear(z, f.Mul(e.half, v.s0[i]), f.Mul(e.half, v.s1[i]), g)
	}
}

// diagonal sets z = C_aa = - sum of e_a.k_c/z_ac over c != a. For a != 1 leg 1
// drops out; for a = 1, times z_1^2, it is - sum of e_1.k_c z_c: the leading
// order of the sum vanishes by momentum conservation.
func (e *psiEvaluator) diagonal(z []prime.Element, v *Solution, a int) {
	f := e.ring.field
	e.ring.SetConstant(z, 0)
	for c := 2; c <= e.legs; c++ {
		if c == a {
			continue
		}
		row := v.Coordinate(c)
		if a != 1 {
			row = v.Inverse(a, c)
		}
		f.SubScaledRow(z, e.products.EK[(a-1)*e.legs+c-1], row)
	}
}

// ReducedPfaffianA is Pf'A with A_ab = s_ab/z_ab, for an even number of legs.
type ReducedPfaffianA struct{}

// Check reports an odd number of legs.
func (x ReducedPfaffianA) Check(_ *prime.Field, legs int) error {
	if legs%2 != 0 {
		return fmt.Errorf("the reduced Pfaffian of A needs an even number of legs, got %d", legs)
	}
	return nil
}

// Moebius returns 1.
func (x ReducedPfaffianA) Moebius(int) int { return 1 }

// Weight returns |I|/2 - 1 for even |I|, whose leading block has the null vector
// (1,..,1), and (|I| - 1)/2 for odd |I|.
func (x ReducedPfaffianA) Weight(set scattering.Channel) int { return (set.Size() - 1) / 2 }

// Growth returns n/2 - 1.
func (x ReducedPfaffianA) Growth(legs int) int { return legs/2 - 1 }

// Evaluator takes out legs 1 and n: Pf'A = - Pf A(2..n-1), the sign being
// (-1)^(1+n) for even n.
func (x ReducedPfaffianA) Evaluator(r *Ring, legs int) Evaluator {
	return &pfaffianAEvaluator{r, legs, NewAntisymmetric(r, legs-2)}
}

type pfaffianAEvaluator struct {
	ring   *Ring
	legs   int
	matrix *Antisymmetric
}

func (e *pfaffianAEvaluator) Evaluate(z []prime.Element, v *Solution) {
	for a := 2; a < e.legs; a++ {
		for b := a + 1; b < e.legs; b++ {
			v.timesInvariant(e.matrix.Entry(a-2, b-2), a, b, v.Inverse(a, b))
		}
	}
	e.ring.Pfaffian(z, e.matrix)
	e.ring.raise(z, 0, true)
}
