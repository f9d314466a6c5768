package amplitude

import (
	"math/bits"
	"slices"

	"eliminant/rational/prime"
)

// diagram is one cubic tree: the numbers of its n-3 propagators and its sign.
type diagram struct {
	poles    []int
	negative bool
}

// diagramPlan lists the cubic diagrams of an amplitude. It is built from
// channels and their compatibility only, nothing of the recursions is used.
type diagramPlan struct {
	n        int
	channels []uint32 // leg a is bit a-1; never contains leg `last`
	diagrams []diagram
}

// planar lists the channels whose legs are neighbours in the cyclic ordering,
// each as the side without the leg last.
func planar(ordering []int, last int) []uint32 {
	n := len(ordering)
	full := uint32(1)<<n - 1
	var out []uint32
	for i := range n {
		var m uint32
		for length := 1; length <= n-2; length++ {
			m |= 1 << (ordering[(i+length-1)%n] - 1)
			if length < 2 {
				continue
			}
			side := m
			if side>>(last-1)&1 == 1 {
				side = full &^ side
			}
			out = append(out, side)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// compatible tells whether two channels (sides without the last leg) can
// propagate in the same tree: nested or disjoint.
func compatible(a, b uint32) bool { return a&b == 0 || a&b == a || a&b == b }

// newCommonDiagrams lists the cubic diagrams planar in both orderings: the sets
// of n-3 compatible common channels. The sign of a diagram is (-1)^(n-3) times
// one minus for every vertex whose orientation differs between the orderings.
func newCommonDiagrams(alpha, beta []int) *diagramPlan {
	n := len(alpha)
	last := alpha[n-1]
	second := planar(beta, last)
	p := &diagramPlan{n: n}
	for _, c := range planar(alpha, last) {
		if _, ok := slices.BinarySearch(second, c); ok {
			p.channels = append(p.channels, c)
		}
	}
	// children before parents, so that orientations can be read off a set
	slices.SortFunc(p.channels, func(a, b uint32) int {
		if d := bits.OnesCount32(a) - bits.OnesCount32(b); d != 0 {
			return d
		}
		return int(a) - int(b)
	})
	inA, inB := places(alpha, last), places(beta, last)
	chosen := make([]int, 0, n-3)
	var extend func(from int)
	extend = func(from int) {
		if len(chosen) == n-3 {
			neg := p.flips(chosen, inA, inB, last)%2 == 1
			if (n-3)%2 == 1 {
				neg = !neg
			}
			p.diagrams = append(p.diagrams, diagram{slices.Clone(chosen), neg})
			return
		}
		for i := from; i <= len(p.channels)-(n-3-len(chosen)); i++ {
			ok := true
			for _, j := range chosen {
				if !compatible(p.channels[i], p.channels[j]) {
					ok = false
					break
				}
			}
			if ok {
				chosen = append(chosen, i)
				extend(i + 1)
				chosen = chosen[:len(chosen)-1]
			}
		}
	}
	extend(0)
	p.prune()
	return p
}

// places returns the place of every leg when the ordering is cut open so that
// the leg last stands last.
func places(ordering []int, last int) []int {
	n := len(ordering)
	at := inverse(ordering)
	out := make([]int, n+1)
	for l := 1; l <= n; l++ {
		out[l] = (at[l] - at[last] - 1 + n) % n
	}
	return out
}

// flips counts the vertices whose two branches away from the last leg stand in
// different order in the two orderings.
func (p *diagramPlan) flips(chosen []int, inA, inB []int, last int) int {
	full := (uint32(1)<<p.n - 1) &^ (1 << (last - 1))
	sets := make([]uint32, 0, len(chosen)+1)
	for _, c := range chosen {
		sets = append(sets, p.channels[c])
	}
	sets = append(sets, full)
	count := 0
	for i, s := range sets {
		// the two largest sets inside s, single legs included
		rest := s
		var branch []uint32
		for j := i - 1; j >= 0; j-- {
			if sets[j]&rest == sets[j] {
				branch = append(branch, sets[j])
				rest &^= sets[j]
			}
		}
		for ; rest != 0; rest &= rest - 1 {
			branch = append(branch, rest&-rest)
		}
		x := bits.TrailingZeros32(branch[0]) + 1
		y := bits.TrailingZeros32(branch[1]) + 1
		if (inA[x] < inA[y]) != (inB[x] < inB[y]) {
			count++
		}
	}
	return count
}

// prune drops the channels that no diagram uses.
func (p *diagramPlan) prune() {
	used := make([]bool, len(p.channels))
	for _, d := range p.diagrams {
		for _, c := range d.poles {
			used[c] = true
		}
	}
	renamed := make([]int, len(p.channels))
	var kept []uint32
	for i, c := range p.channels {
		if used[i] {
			renamed[i] = len(kept)
			kept = append(kept, c)
		}
	}
	p.channels = kept
	for _, d := range p.diagrams {
		for i := range d.poles {
			d.poles[i] = renamed[d.poles[i]]
		}
	}
}

// newAllDiagrams lists all (2n-5)!! cubic diagrams with sign +, by attaching
// legs 3..n-1 in turn to every edge of the tree grown so far.
func newAllDiagrams(n int) *diagramPlan {
	p := &diagramPlan{n: n}
	number := map[uint32]int{}
	// edges: the legs beyond the edge, seen from leg n; the tree on legs 1,2,n
	// has the edges {1}, {2} and {1,2} (the edge of leg n itself)
	edges := make([]uint32, 3, 2*n-3)
	edges[0], edges[1], edges[2] = 1, 2, 3
	var attach func(leg int)
	attach = func(leg int) {
		if leg == n {
			d := diagram{poles: make([]int, 0, n-3)}
			for _, e := range edges {
				if k := bits.OnesCount32(e); k < 2 || k == n-1 {
					continue
				}
				i, ok := number[e]
				if !ok {
					i = len(p.channels)
					number[e] = i
					p.channels = append(p.channels, e)
				}
				d.poles = append(d.poles, i)
			}
			p.diagrams = append(p.diagrams, d)
			return
		}
		bit := uint32(1) << (leg - 1)
		before := slices.Clone(edges)
		for i := range before {
			// edge i is cut in two; every edge on the way to leg n gains the leg
			split := before[i]
			edges = edges[:0]
			for _, e := range before {
				if e != split && e&split == split {
					e |= bit
				}
				edges = append(edges, e)
			}
			edges = append(edges, split|bit, bit)
			attach(leg + 1)
		}
		edges = append(edges[:0], before...)
	}
	attach(3)
	return p
}

// evaluate adds the diagrams over GF(p); pole returns the propagator
// denominator of a channel. Cost: (n-3) products per diagram.
func (p *diagramPlan) evaluate(f *prime.Field, pole func(mask uint32) prime.Element) (prime.Element, error) {
	work := make([]prime.Element, 2*len(p.channels))
	den, inv := work[:len(p.channels)], work[len(p.channels):]
	for i, c := range p.channels {
		den[i] = pole(c)
	}
	if _, ok := f.InvertRow(inv, den); !ok {
		return 0, prime.ErrBadPrime
	}
	var sum prime.Element
	for _, d := range p.diagrams {
		v := f.One()
		for _, i := range d.poles {
			v = f.Mul(v, inv[i])
		}
		if d.negative {
			sum = f.Sub(sum, v)
		} else {
			sum = f.Add(sum, v)
		}
	}
	return sum, nil
}
