package integrand

import (
	"fmt"
	"testing"

	"eliminant/rational/prime"
	"eliminant/rational/scattering"

	"github.com/stretchr/testify/require"
)

func legs(n int) []int {
	z := upTo(n)
	for i := range z {
		z[i]++
	}
	return z
}

// planar lists the channels whose legs are consecutive in an ordering.
func planar(order []int) map[scattering.Channel]bool {
	n := len(order)
	z := map[scattering.Channel]bool{}
	for i := range n {
		for size := 2; size <= n-2; size++ {
			var c scattering.Channel
			for k := range size {
				c |= 1 << (order[(i+k)%n] - 1)
			}
			z[c.Canonical(n)] = true
		}
	}
	return z
}

// The number of poles and the degrees of the theories in closed form; all poles
// are simple.
func TestPolesInClosedForm(t *testing.T) {
	p := &Products{}
	check := func(name string, x Factor, n, poles, degree int, among map[scattering.Channel]bool, odd bool) {
		t.Helper()
		require.NoError(t, CheckMoebius(x, n), name)
		list := Poles(x, n)
		require.Len(t, list, poles, "%s, %d legs", name, n)
		require.Equal(t, degree, NumeratorDegree(x, n), "%s, %d legs", name, n)
		for _, q := range list {
			require.Equal(t, 1, q.Order)
			require.Equal(t, q.Channel.Canonical(n), q.Channel)
			if among != nil {
				require.True(t, among[q.Channel], "%s %v", name, q.Channel)
			}
			require.False(t, odd && q.Channel.Size()%2 == 0, "%s %v", name, q.Channel)
		}
	}
	for n := 4; n <= 10; n++ {
		full := legs(n)
		pt, a, psi := ParkeTaylor{full}, ReducedPfaffianA{}, ReducedPfaffian{p}
		consecutive := planar(full)
		P := n * (n - 3) / 2
		check("BS", Power{pt, 2}, n, P, P-(n-3), consecutive, false)
		check("YM", Product{pt, psi}, n, P, P-(n-3)+n/2-1, consecutive, false)
		all := 1<<(n-1) - n - 1
		check("GR", Power{psi, 2}, n, all, all-(n-3)+2*(n/2-1), nil, false)
		if n%2 == 0 {
			P := n * (n - 4) / 4
			check("NLSM", Product{pt, Power{a, 2}}, n, P, P+1, consecutive, true)
			P = 1<<(n-2) - n
			check("BI", Product{psi, Power{a, 2}}, n, P, P+n/2, nil, true)
			check("sGal", Power{a, 4}, n, P, P+n-1, nil, true)
		}
		for h := 1; h <= n-2; h++ {
			r := n - h
			trace := ParkeTaylor{full[:r]}
			P := 1<<h*(r*r-r+2)/2 - n - 1
			subset := SubsetPfaffian{p, full[r:]}
			check("EYM", Product{trace, subset, psi}, n, P, P-(n-3)+n/2-1+h/2, nil, false)
			P = 0
			for _, q := range Poles(Product{trace, subset, psi}, n) {
				if consecutive[q.Channel] {
					P++
				}
			}
			check("YMS", Product{pt, trace, subset}, n, P, P-(n-3)+h/2, consecutive, false)
		}
	}
}

func TestPolesOfTwoOrderings(t *testing.T) {
	source := prime.NewSource("orderings")
	for i := range 40 {
		n := 4 + i%6
		a, b := legs(n), legs(n)
		for i := n - 1; i > 0; i-- {
			j := int(source.Below(uint64(i + 1)))
			b[i], b[j] = b[j], b[i]
		}
		x := Product{ParkeTaylor{a}, ParkeTaylor{b}}
		first, second := planar(a), planar(b)
		for c := range second {
			second[c] = first[c]
		}
		common := 0
		for _, yes := range second {
			if yes {
				common++
			}
		}
		list := Poles(x, n)
		require.Len(t, list, common, "%v", b)
		for _, q := range list {
			require.True(t, second[q.Channel] && q.Order == 1)
		}
		require.Equal(t, common-(n-3), NumeratorDegree(x, n))
	}
}

// Products of differences with higher poles: 1/(z_12^2 z_23^2 z_31^2 ..) has w = 6
// on {1,2,3}, chi = 2, a triple pole.
func TestHigherPoles(t *testing.T) {
	x := Product{Power{ParkeTaylor{[]int{1, 2, 3}}, 2}, Power{ParkeTaylor{[]int{4, 5, 6}}, 2}}
	require.NoError(t, CheckMoebius(x, 6))
	orders := map[string]int{}
	for _, q := range Poles(x, 6) {
		orders[q.Channel.String()] = q.Order
	}
	require.Equal(t, map[string]int{"s123": 3, "s12": 1, "s13": 1, "s23": 1, "s45": 1, "s46": 1, "s56": 1}, orders)

	// numerators lower the order: z_12/(..) has one link less
	y := append(Product{Difference{1, 4, 1}, Difference{2, 5, 1}, Difference{1, 5, -1}, Difference{2, 4, -1}}, x...)
	require.NoError(t, CheckMoebius(y, 6))
	require.Equal(t, Chi(x, 6, 0b000111), Chi(y, 6, 0b000111))
	require.Equal(t, Chi(x, 6, 0b001001)-1, Chi(y, 6, 0b001001))
	require.Equal(t, Chi(y, 6, 0b001001), Chi(y, 6, 0b110110)) // complement
}

func ExamplePoles() {
	order := ParkeTaylor{Ordering: []int{1, 2, 3, 4, 5}}
	other := ParkeTaylor{Ordering: []int{1, 3, 2, 4, 5}}
	x := Product{order, other}
	for _, pole := range Poles(x, 5) {
		fmt.Println(pole.Channel, pole.Order)
	}
	fmt.Println("numerator of degree", NumeratorDegree(x, 5))
	// Output:
	// s23 1
	// s15 1
	// s45 1
	// numerator of degree 1
}
