package amplitude

// inverse returns the place (0-based) of every leg (1-based) in an ordering.
func inverse(ordering []int) []int {
	at := make([]int, len(ordering)+1)
	for i, l := range ordering {
		at[l] = i
	}
	return at
}

// relative rewrites beta in the labels that turn alpha into 0..n-1, rotated so
// that the last label of alpha stands last: m(alpha|beta) is cyclic in each.
func relative(alpha, beta []int) []int {
	n := len(alpha)
	at := inverse(alpha)
	w := make([]int, n)
	last := 0
	for i, l := range beta {
		w[i] = at[l]
		if w[i] == n-1 {
			last = i
		}
	}
	return append(append([]int{}, w[last+1:]...), w[:last+1]...)
}

// term is one way of cutting an interval in two that both orderings allow.
type term struct {
	left, right int // nodes
	negative    bool
}

// node is a set of neighbouring legs, first..last in the labels of alpha, that
// are neighbours in beta as well: a word P with its one partner Q. Its current
// is the sum over its terms of +-left*right, divided by -s_P.
type node struct {
	first, last int
	terms       []term
	pole        int // number of the pole s_P, -1 for single legs
}

// wordPlan is the double recursion for m(alpha|beta) with everything that does
// not depend on the point worked out: C. R. Mafra, Berends-Giele recursion for
// double-color-ordered amplitudes, JHEP 07 (2016) 080, arXiv:1603.09731, in the
// signs
//
//	phi_{i|j} = delta_ij,
//	phi_{P|Q} = -(1/s_P) sum_{XY=P, AB=Q} (phi_{X|A} phi_{Y|B} - phi_{Y|A} phi_{X|B}),
//	m(P n|Q n) = -s_P phi_{P|Q}.
//
// A word P has at most one partner Q with a current that is not zero, so there
// are O(n^2) nodes and O(n^3) terms.
type wordPlan struct {
	n     int
	nodes []node  // children before parents; only those that reach the root
	root  []term  // m = sum of these
	poles [][]int // per pole: the places (0-based in alpha) of its legs
	// diagrams is the number of cubic diagrams common to both orderings
	// (exact while below 2^53).
	diagrams float64
}

// newWordPlan works out the recursion for two orderings of the same n legs.
func newWordPlan(alpha, beta []int) *wordPlan {
	n := len(alpha)
	q := relative(alpha, beta)
	place := make([]int, n)
	for i, l := range q {
		place[l] = i
	}
	m := n - 1 // legs in the words
	// start[i][j]: first place in beta of the legs i..j if they are neighbours
	start := make([][]int, m)
	for i := range m {
		start[i] = make([]int, m)
		lo, hi := place[i], place[i]
		for j := i; j < m; j++ {
			lo, hi = min(lo, place[j]), max(hi, place[j])
			start[i][j] = -1
			if hi-lo == j-i {
				start[i][j] = lo
			}
		}
	}
	index := make([][]int, m)
	for i := range index {
		index[i] = make([]int, m)
		for j := range index[i] {
			index[i][j] = -1
		}
	}
	var all []node
	var counts []float64
	for length := 1; length <= m; length++ {
		for i := 0; i+length <= m; i++ {
			j := i + length - 1
			if start[i][j] < 0 {
				continue
			}
			nd := node{first: i, last: j, pole: -1}
			count := 1.0
			if length > 1 {
				count = 0
				for k := i; k < j; k++ {
					x, y := index[i][k], index[k+1][j]
					if x < 0 || y < 0 {
						continue
					}
					nd.terms = append(nd.terms, term{x, y, start[i][k] != start[i][j]})
					count += counts[x] * counts[y]
				}
				if count == 0 {
					continue // no diagram inside: the current vanishes
				}
			}
			index[i][j] = len(all)
			all = append(all, nd)
			counts = append(counts, count)
		}
	}
	p := &wordPlan{n: n}
	top := index[0][m-1]
	if top < 0 {
		return p
	}
	p.diagrams = counts[top]
	p.keep(all, top)
	return p
}

// keep copies the nodes that some diagram uses, numbering poles on the way.
func (p *wordPlan) keep(all []node, top int) {
	used := make([]bool, len(all))
	used[top] = true
	for i := top; i >= 0; i-- {
		if used[i] {
			for _, t := range all[i].terms {
				used[t.left], used[t.right] = true, true
			}
		}
	}
	renamed := make([]int, len(all))
	for i, nd := range all {
		if !used[i] {
			continue
		}
		terms := make([]term, len(nd.terms))
		for k, t := range nd.terms {
			terms[k] = term{renamed[t.left], renamed[t.right], t.negative}
		}
		nd.terms = terms
		if i == top {
			p.root = terms
			return
		}
		if nd.last > nd.first {
			nd.pole = len(p.poles)
			legs := make([]int, 0, nd.last-nd.first+1)
			for l := nd.first; l <= nd.last; l++ {
				legs = append(legs, l)
			}
			p.poles = append(p.poles, legs)
		}
		renamed[i] = len(p.nodes)
		p.nodes = append(p.nodes, nd)
	}
}
