package integrand

import (
	"fmt"

	"eliminant/rational/scattering"
)

// Pole is a possible pole of a sum over solutions: s_I^-Order, I the channel.
type Pole struct {
	Channel scattering.Channel
	Order   int
}

// WeightError says that an integrand is not of Moebius weight 4 in a leg, so its
// sum over solutions depends on the gauge.
type WeightError struct{ Leg, Weight int }

func (e *WeightError) Error() string {
	return fmt.Sprintf("the integrand has Moebius weight %d in leg %d, expected 4", e.Weight, e.Leg)
}

// CheckMoebius returns a *WeightError unless x has weight 4 in every leg.
func CheckMoebius(x Factor, legs int) error {
	for a := 1; a <= legs; a++ {
		if w := x.Moebius(a); w != 4 {
			return &WeightError{a, w}
		}
	}
	return nil
}

// Chi returns a bound of chi_I = w_I - 2(|I| - 1) for an integrand of weight 4 in
// every leg. A set and its complement have one chi_I; the smaller of both bounds
// is returned.
func Chi(x Factor, legs int, set scattering.Channel) int {
	full := scattering.Channel(1)<<legs - 1
	other := full &^ set
	return min(x.Weight(set)-2*(set.Size()-1), x.Weight(other)-2*(other.Size()-1))
}

// Poles returns the possible poles of the sum over solutions of an integrand of
// weight 4 in every leg: the sum is singular only where some s_I = 0, and there
// its order is at most max(0, chi_I + 1). Channels come in ascending order of
// their canonical masks. Cost: 2^(n-1) channels. For products of differences this
// is the rule of Baadsgaard, Bjerrum-Bohr, Bourjaily, Damgaard, JHEP 09 (2015)
// 129, arXiv:1506.06137.
func Poles(x Factor, legs int) []Pole {
	var poles []Pole
	for c := range scattering.Channel(1) << legs {
		if c != c.Canonical(legs) || c.Size() < 2 {
			continue
		}
		if order := Chi(x, legs, c) + 1; order > 0 {
			poles = append(poles, Pole{c, order})
		}
	}
	return poles
}

// NumeratorDegree returns a bound of the degree of (sum over solutions of x) times
// the product of its poles along a line of invariants: the number of poles with
// their orders, less n-3 for 1/det Phi, plus the degree of the integrand. A
// negative bound means that the sum is 0.
func NumeratorDegree(x Factor, legs int) int {
	degree := x.Growth(legs) - (legs - 3)
	for _, p := range Poles(x, legs) {
		degree += p.Order
	}
	return degree
}
