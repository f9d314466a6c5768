package resultant

import (
	"cmp"
	"math/bits"
	"slices"
	"sync"
)

// plan is the shape of the pencil for n legs: everything that depends on n
// alone. It is computed once and shared by all pencils.
//
// With k = n-4, sets V of {1..k} are bit masks (bit j-1 for j), listed by size
// and then by value; position i of that list is "set i". Columns beta,
// 0 <= beta_j <= j, have the mixed-radix index sum beta_j j!, so adding 1_V to an
// exponent adds offset[V] = sum over j in V of j! to its index.
type plan struct {
	n, k, size int
	sets       []uint32 // masks by size
	offset     []int32  // by set
	level      []int    // level[m]: first set of size m, level[k+1] = 2^k
	bases      []int32  // index of column alpha, for all k! exponents alpha of rows
	rows       []row    // in the order of substitution
	top        int      // index of prod x_j^j
}

// row is one row (alpha, m) of the pencil with its pivot beta = alpha + 1_U.
type row struct {
	base  int32  // index of column alpha
	place int32  // where T0 x keeps its entry
	pivot int32  // index of column beta
	set   uint16 // set U
	size  uint8  // |U| = m-1
}

var plans [MaxLegs + 1]struct {
	sync.Once
	*plan
}

// planFor returns the plan for n legs, 4 <= n <= MaxLegs.
func planFor(n int) *plan {
	p := &plans[n]
	p.Do(func() { p.plan = newPlan(n) })
	return p.plan
}

// newPlan lists the rows in an order in which T1 is lower triangular: pivots by
// (degree, word), the word of beta being the permutation of 0..k with inversion
// code beta (beta_j letters below j stand left of j). For a row (alpha, m) the
// entries of T1 in columns alpha + 1_V other than the pivot have |V| = m-2, hence
// lower degree, or |V| = m-1 and then a lesser word. Every column is the pivot of
// exactly one row: with q = 0, for j = 1..k, j belongs to U if beta_j > q, else q
// grows by one; alpha = beta - 1_U.
func newPlan(n int) *plan {
	k := n - 4
	p := &plan{n: n, k: k, size: 1}
	factorial := make([]int, k+2)
	factorial[0] = 1
	for j := 1; j <= k+1; j++ {
		factorial[j] = factorial[j-1] * j
	}
	p.size = factorial[k+1]
	p.listSets(factorial)
	setOf := make([]uint16, 1<<k)
	for i, v := range p.sets {
		setOf[v] = uint16(i)
	}

	type column struct {
		word   uint64 // letters, four bits each, first letter on top
		degree int
		row    row
	}
	columns := make([]column, p.size)
	beta := make([]int, k+1)
	word := make([]int, 0, k+1)
	for i := range columns {
		c := &columns[i]
		word = append(word[:0], 0)
		var u uint32
		q := 0
		for j := 1; j <= k; j++ {
			beta[j] = i / factorial[j] % (j + 1)
			c.degree += beta[j]
			word = slices.Insert(word, beta[j], j)
			if beta[j] > q {
				u |= 1 << (j - 1)
			} else {
				q++
			}
		}
		for _, letter := range word {
			c.word = c.word<<4 | uint64(letter)
		}
		s := setOf[u]
		c.row = row{base: int32(i) - p.offset[s], pivot: int32(i), set: s, size: uint8(bits.OnesCount32(u))}
	}
	p.top = p.size - 1
	slices.SortFunc(columns, func(a, b column) int {
		return cmp.Or(cmp.Compare(a.degree, b.degree), cmp.Compare(a.word, b.word))
	})
	p.rows = make([]row, p.size)
	for i, c := range columns {
		p.rows[i] = c.row
		if c.row.size == 0 { // m = 1 occurs once for every alpha
			p.bases = append(p.bases, c.row.base)
		}
	}
	slices.Sort(p.bases)
	number := make(map[int32]int32, len(p.bases))
	for i, b := range p.bases {
		number[b] = int32(i)
	}
	for i := range p.rows {
		r := &p.rows[i]
		r.place = number[r.base]*int32(k+1) + int32(r.size)
	}
	return p
}

func (p *plan) listSets(factorial []int) {
	k := p.k
	p.sets = make([]uint32, 1<<k)
	for v := range p.sets {
		p.sets[v] = uint32(v)
	}
	slices.SortFunc(p.sets, func(a, b uint32) int {
		return cmp.Or(cmp.Compare(bits.OnesCount32(a), bits.OnesCount32(b)), cmp.Compare(a, b))
	})
	p.offset = make([]int32, 1<<k)
	p.level = make([]int, k+2)
	p.level[k+1] = 1 << k
	for i, v := range p.sets {
		for r := v; r != 0; r &= r - 1 {
			p.offset[i] += int32(factorial[bits.TrailingZeros32(r)+1])
		}
		if m := bits.OnesCount32(v); i == 0 || m != bits.OnesCount32(p.sets[i-1]) {
			p.level[m] = i
		}
	}
}

// variable returns the column index of x_j, 1 <= j <= k.
func (p *plan) variable(j int) int {
	i := 1
	for ; j > 1; j-- {
		i *= j
	}
	return i
}
