package integrand

import (
	"fmt"

	"eliminant/rational/prime"
)

// Products is the data of polarised legs over GF(p): n x n matrices by leg with
// entry (a-1) n + b-1. Nothing else about momenta and polarisations enters.
type Products struct {
	KK []prime.Element // k_a.k_b = s_ab/2; may be nil, the invariants say the same
	EK []prime.Element // e_a.k_b, rows summing to 0, e_a.k_a = 0
	EE []prime.Element // e_a.e_b, symmetric; the diagonal is not read
	FK []prime.Element // a second set of polarisations f, nil if f = e
	FF []prime.Element
}

// Second returns the products of the second set of polarisations in place of the
// first, or the same ones if there is no second set.
func (p *Products) Second() *Products {
	if p.FK == nil && p.FF == nil {
		return p
	}
	return &Products{KK: p.KK, EK: p.FK, EE: p.FF}
}

// ProductsError names the entry of the data of a leg that is not as it must be.
type ProductsError struct {
	Leg    int
	Reason string
}

func (e *ProductsError) Error() string {
	if e.Leg == 0 {
		return "products: " + e.Reason
	}
	return fmt.Sprintf("products: leg %d: %s", e.Leg, e.Reason)
}

// check checks EK and EE; of legs outside among (nil: all) nothing is asked.
func (p *Products) check(f *prime.Field, legs int, among []int) error {
	if p == nil {
		return &ProductsError{0, "missing"}
	}
	if len(p.EK) != legs*legs || len(p.EE) != legs*legs {
		return &ProductsError{0, fmt.Sprintf("matrices of %d and %d entries, expected %d", len(p.EK), len(p.EE), legs*legs)}
	}
	if among == nil {
		for a := 1; a <= legs; a++ {
			among = append(among, a)
		}
	}
	for _, a := range among {
		row := p.EK[(a-1)*legs : a*legs]
		var sum prime.Element
		for _, x := range row {
			sum = f.Add(sum, x)
		}
		if row[a-1] != 0 {
			return &ProductsError{a, "the polarisation is not orthogonal to its own momentum"}
		}
		if sum != 0 {
			return &ProductsError{a, "the products of the polarisation with all momenta do not add up to 0"}
		}
		for _, b := range among {
			if p.EE[(a-1)*legs+b-1] != p.EE[(b-1)*legs+a-1] {
				return &ProductsError{a, fmt.Sprintf("the products with the polarisation of leg %d are not symmetric", b)}
			}
		}
	}
	return nil
}
