package generate

import (
	"math/bits"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// allChannels is the number of legs up to which every channel is looked at.
const allChannels = 16

// regular reports whether no channel of the invariants vanishes, as ComputePoints
// promises. The test is modulo one prime: an invariant that is not zero there is
// not zero, and one that is counts as vanishing.
func regular(v *kinematics.Invariants) bool {
	f := prime.TableField(0)
	r, err := v.Reduce(f)
	if err != nil {
		return false
	}
	n := r.N
	mass := r.MassSquared(1)
	twice := f.Add(mass, mass)
	// over Lorentz squares and over the shifted matrix
	products, shifted := make([]prime.Element, n*n), make([]prime.Element, n*n)
	for a := range n {
		for b := range n {
			if a == b {
				continue
			}
			x := f.Sub(r.S[a*n+b], twice)
			products[a*n+b], shifted[a*n+b] = x, x
			if b == (a+1)%n || a == (b+1)%n {
				shifted[a*n+b] = f.Add(x, mass)
			}
		}
	}
	c := &channels{f: f, n: n, mass: mass, products: products, shifted: shifted}
	if n > allChannels {
		return c.some()
	}
	return c.all()
}

// channels evaluates sums over subsets of the legs.
type channels struct {
	f                 *prime.Field
	n                 int
	mass              prime.Element
	products, shifted []prime.Element
}

// accept decides by the sums of products and shifted over the pairs of a channel
// of the given size.
func (c *channels) accept(size int, products, shifted prime.Element) bool {
	if size < 2 || size > c.n-2 {
		return true
	}
	square := c.f.Add(products, c.f.Mul(c.f.FromInt64(int64(size)), c.mass))
	if square == 0 {
		return false
	}
	return c.mass == 0 || square != c.mass && shifted != 0
}

// all goes through the subsets without leg n in Gray order: one leg enters or
// leaves at a time.
func (c *channels) all() bool {
	f, n := c.f, c.n
	var products, shifted prime.Element
	set := uint32(0)
	for i := uint32(1); i < 1<<(n-1); i++ {
		a := bits.TrailingZeros32(i)
		rest := set &^ (1 << a)
		var x, y prime.Element
		for r := rest; r != 0; r &= r - 1 {
			at := a*n + bits.TrailingZeros32(r)
			x = f.Add(x, c.products[at])
			y = f.Add(y, c.shifted[at])
		}
		if rest == set {
			products, shifted = f.Add(products, x), f.Add(shifted, y)
		} else {
			products, shifted = f.Sub(products, x), f.Sub(shifted, y)
		}
		set ^= 1 << a
		if !c.accept(bits.OnesCount32(set), products, shifted) {
			return false
		}
	}
	return true
}

// some looks at pairs and runs of consecutive legs.
func (c *channels) some() bool {
	n := c.n
	for a := range n {
		for b := range a {
			if !c.sum(a, b) {
				return false
			}
		}
	}
	for a := range n {
		run := []int{a}
		for length := 2; length <= n-2; length++ {
			if run = append(run, (a+length-1)%n); !c.sum(run...) {
				return false
			}
		}
	}
	return true
}

// sum decides about one channel.
func (c *channels) sum(legs ...int) bool {
	var x, y prime.Element
	for i, a := range legs {
		for _, b := range legs[:i] {
			x = c.f.Add(x, c.products[a*c.n+b])
			y = c.f.Add(y, c.shifted[a*c.n+b])
		}
	}
	return c.accept(len(legs), x, y)
}
