package groebner_test

import (
	"fmt"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/groebner"
	"eliminant/rational/prime"
)

// BenchmarkScattering is the whole work for one prime: basis, quotient with all
// multiplication matrices, and a trace N/D.
func BenchmarkScattering(b *testing.B) {
	f := prime.TableField(0)
	for n := 5; n <= 8; n++ {
		s := drawInvariants(b, f, n, "benchmark")
		h := constraints(b, f, groebner.GrevLex, s)
		r := h[0].Ring()
		numerator := r.Variable(0)
		denominator := r.One()
		for i := range r.Variables() {
			denominator.Mul(denominator, new(groebner.Polynomial).Sub(r.Variable(i), r.One()))
		}
		var basis *groebner.Basis
		var quotient *groebner.Quotient
		var err error
		b.Run(fmt.Sprintf("n=%d/basis", n), func(b *testing.B) {
			for b.Loop() {
				basis, err = groebner.ComputeBasis(background, h, groebner.Options{})
				require.NoError(b, err)
			}
		})
		b.Run(fmt.Sprintf("n=%d/quotient", n), func(b *testing.B) {
			for b.Loop() {
				quotient, err = groebner.ComputeQuotient(background, basis, groebner.QuotientOptions{})
				require.NoError(b, err)
			}
		})
		b.Run(fmt.Sprintf("n=%d/matrices", n), func(b *testing.B) {
			for b.Loop() {
				for k := range r.Variables() {
					quotient.VariableMatrix(k)
				}
			}
		})
		b.Run(fmt.Sprintf("n=%d/trace", n), func(b *testing.B) {
			for b.Loop() {
				_, err = quotient.TraceQuotient(background, numerator, denominator)
				require.NoError(b, err)
			}
		})
		b.Run(fmt.Sprintf("n=%d/characteristic", n), func(b *testing.B) {
			x, err := quotient.Coordinates(background, numerator)
			require.NoError(b, err)
			for b.Loop() {
				_, err = quotient.CharacteristicPolynomial(background, x)
				require.NoError(b, err)
			}
		})
	}
}

func BenchmarkSystems(b *testing.B) {
	f := smallField(b)
	for _, c := range []struct {
		name       string
		generators []*groebner.Polynomial
	}{
		{"katsura-5", katsura(b, f, 5)},
		{"katsura-6", katsura(b, f, 6)},
		{"cyclic-5", cyclic(b, f, 5)},
		{"cyclic-6", cyclic(b, f, 6)},
	} {
		for name, strategy := range map[string]groebner.Strategy{"sugar": groebner.Sugar, "normal": groebner.Normal} {
			b.Run(c.name+"/"+name, func(b *testing.B) {
				for b.Loop() {
					_, err := groebner.ComputeBasis(background, c.generators, groebner.Options{Strategy: strategy})
					require.NoError(b, err)
				}
			})
		}
	}
}
