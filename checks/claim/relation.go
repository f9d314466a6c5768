package claim

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"eliminant/checks/formula"
)

// identity is one equality between two formulas; a relation is a list of them.
type identity struct{ left, right *formula.Formula }

// relationIdentities writes a relation out for the amplitude it is claimed of.
// Every relation acts on the last ordering: for BS(a|b) on b, while a carries
// the mass shift.
//
// With the ordering b = (1, 2, ..., n) these are (R. Kleiss, H. Kuijf, Nucl.
// Phys. B 312 (1989) 616; Z. Bern, J. J. M. Carrasco, H. Johansson, Phys. Rev. D 78
// (2008) 085011, arXiv:0805.3993):
//
//	cyclicity     A(2..n,1) = A(1..n), all rotations
//	reflection    A(n..1) = (-1)^n A(1..n), sign + for phi3
//	u1-decoupling sum over the n-1 places of leg 1 in A(2,..,n) = 0
//	kleiss-kuijf  A(1,al,l,be) = (-1)^|be| sum over shuffles w of al with
//	              reversed be of A(1,w,l), for every l
//	bcj           sum_{i=2}^{n-1} (s_12 + ... + s_1i) A(2,..,i,1,i+1,..,n) = 0,
//	              the s shifted along a where there are masses
func relationIdentities(kind string, of *formula.Formula, massive bool) ([]identity, error) {
	a := of.Root.(*formula.Amplitude)
	labels := make([][]int, len(a.Orderings))
	for i, o := range a.Orderings {
		for _, leg := range o {
			labels[i] = append(labels[i], leg.Label)
		}
	}
	w := writer{theory: a.Theory, orderings: labels, massive: massive}
	var pairs [][2]string
	switch kind {
	case "cyclicity":
		pairs = w.cyclicity()
	case "reflection":
		pairs = w.reflection()
	case "u1-decoupling":
		pairs = w.decoupling()
	case "kleiss-kuijf":
		pairs = w.kleissKuijf()
	case "bcj":
		pairs = w.bcj()
	default:
		return nil, fmt.Errorf("relation %q is not a list of equalities", kind)
	}
	out := make([]identity, len(pairs))
	for i, p := range pairs {
		for j, side := range p {
			f, errs := formula.Parse(side, formula.ParseOptions{})
			if len(errs) > 0 {
				return nil, fmt.Errorf("relation %s: %q: %w", kind, side, errs)
			}
			if j == 0 {
				out[i].left = f
			} else {
				out[i].right = f
			}
		}
	}
	return out, nil
}

// writer writes amplitudes of one theory with the last ordering replaced.
type writer struct {
	theory    string
	orderings [][]int
	massive   bool
}

// ordering returns the ordering that relations act on.
func (w writer) ordering() []int { return w.orderings[len(w.orderings)-1] }

// with writes the amplitude with another last ordering.
func (w writer) with(last []int) string {
	o := append(slices.Clone(w.orderings[:len(w.orderings)-1]), last)
	return writeAmplitude(w.theory, o)
}

func writeAmplitude(theory string, orderings [][]int) string {
	parts := make([]string, len(orderings))
	for i, o := range orderings {
		parts[i] = commas(o)
	}
	return theory + "(" + strings.Join(parts, "|") + ")"
}

func commas(o []int) string {
	s := make([]string, len(o))
	for i, l := range o {
		s[i] = strconv.Itoa(l)
	}
	return strings.Join(s, ",")
}

func (w writer) cyclicity() [][2]string {
	original := writeAmplitude(w.theory, w.orderings)
	var out [][2]string
	for k := range w.orderings {
		for turn := 1; turn < len(w.orderings[k]); turn++ {
			o := slices.Clone(w.orderings)
			o[k] = append(slices.Clone(o[k][turn:]), o[k][:turn]...)
			out = append(out, [2]string{writeAmplitude(w.theory, o), original})
		}
	}
	return out
}

func (w writer) reflection() [][2]string {
	r := slices.Clone(w.ordering())
	slices.Reverse(r)
	right := writeAmplitude(w.theory, w.orderings)
	if w.theory != "phi3" && len(r)%2 == 1 {
		right = "-" + right
	}
	return [][2]string{{w.with(r), right}}
}

func (w writer) decoupling() [][2]string {
	o := w.ordering()
	var terms []string
	for i := 2; i <= len(o); i++ {
		terms = append(terms, w.with(slices.Insert(slices.Clone(o[1:]), i-1, o[0])))
	}
	return [][2]string{{strings.Join(terms, "+"), "0"}}
}

func (w writer) kleissKuijf() [][2]string {
	o := w.ordering()
	n := len(o)
	var out [][2]string
	for k := 1; k < n-1; k++ { // leg o[k] plays the part of the last leg
		between, after := o[1:k], slices.Clone(o[k+1:])
		slices.Reverse(after)
		var terms []string
		shuffle(between, after, func(s []int) {
			t := append([]int{o[0]}, s...)
			terms = append(terms, w.with(append(t, o[k])))
		})
		right := strings.Join(terms, "+")
		if len(after)%2 == 1 {
			right = "-(" + right + ")"
		}
		out = append(out, [2]string{w.with(o), right})
	}
	return out
}

// shuffle visits every merge of x and y that keeps the order inside each.
func shuffle(x, y []int, visit func([]int)) {
	var merge func(done, x, y []int)
	merge = func(done, x, y []int) {
		if len(x) == 0 || len(y) == 0 {
			visit(append(append(slices.Clone(done), x...), y...))
			return
		}
		merge(append(slices.Clone(done), x[0]), x[1:], y)
		merge(append(slices.Clone(done), y[0]), x, y[1:])
	}
	merge(nil, x, y)
}

func (w writer) bcj() [][2]string {
	o := w.ordering()
	n := len(o)
	var terms []string
	factor := ""
	for i := 1; i < n-1; i++ {
		if factor != "" {
			factor += "+"
		}
		factor += w.invariant(o[0], o[i])
		order := slices.Insert(slices.Clone(o[1:]), i, o[0])
		terms = append(terms, "("+factor+")*"+w.with(order))
	}
	return [][2]string{{strings.Join(terms, "+"), "0"}}
}

// invariant writes s_ab, with masses as the scattering equations have it:
// 2 k_a.k_b, plus m^2 between neighbours of the first ordering.
func (w writer) invariant(a, b int) string {
	s := fmt.Sprintf("s(%d,%d)", a, b)
	if !w.massive {
		return s
	}
	first := w.orderings[0]
	i, j := slices.Index(first, a), slices.Index(first, b)
	if d := (i - j + len(first)) % len(first); d == 1 || d == len(first)-1 {
		return s + "-msq"
	}
	return s + "-2*msq"
}
