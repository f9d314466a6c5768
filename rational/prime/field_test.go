package prime

import (
	"errors"
	"fmt"
	"math"
	"math/big"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func ExampleField() {
	f, _ := NewField(10007)
	x, _ := f.Div(f.FromInt64(-7), f.FromInt64(13))
	fmt.Println(f.Uint64(x))
	// Output: 1539
}

func drawField(t *rapid.T) *Field {
	switch rapid.IntRange(0, 2).Draw(t, "kind") {
	case 0:
		return TableField(rapid.IntRange(0, 20).Draw(t, "index"))
	case 1:
		return NewSource("field test", rapid.String().Draw(t, "seed")).Field()
	}
	f, err := NewField(rapid.SampledFrom([]uint64{3, 5, 7, 10007, 1<<61 - 1, 2147483647}).Draw(t, "p"))
	require.NoError(t, err)
	return f
}

func drawElement(t *rapid.T, f *Field, label string) Element {
	if rapid.Bool().Draw(t, label+" extreme") {
		return Element(f.p - 1 - rapid.Uint64Range(0, min(2, f.p-1)).Draw(t, label))
	}
	return Element(rapid.Uint64Range(0, f.p-1).Draw(t, label))
}

// Conformance with math/big.
func TestFieldAgainstBig(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		p := new(big.Int).SetUint64(f.Modulus())
		x, y := drawElement(t, f, "x"), drawElement(t, f, "y")
		bx, by := f.Int(new(big.Int), x), f.Int(new(big.Int), y)
		same := func(want *big.Int, got Element, what string) {
			require.Less(t, uint64(got), f.p, "canonical")
			require.Zero(t, want.Mod(want, p).Cmp(f.Int(new(big.Int), got)), what)
			require.Equal(t, want.Uint64(), f.Uint64(got), what)
		}
		same(new(big.Int).Add(bx, by), f.Add(x, y), "sum")
		same(new(big.Int).Sub(bx, by), f.Sub(x, y), "difference")
		same(new(big.Int).Mul(bx, by), f.Mul(x, y), "product")
		same(new(big.Int).Mul(bx, bx), f.Square(x), "square")
		same(new(big.Int).Neg(bx), f.Neg(x), "negative")
		e := rapid.Uint64().Draw(t, "e")
		same(new(big.Int).Exp(bx, new(big.Int).SetUint64(e), p), f.Exp(x, e), "power")
		inv, ok := f.Inv(x)
		require.Equal(t, x != 0, ok)
		if ok {
			same(new(big.Int).ModInverse(bx, p), inv, "inverse")
		}
		q, ok := f.Div(y, x)
		require.Equal(t, x != 0, ok)
		if ok {
			require.Equal(t, y, f.Mul(q, x))
		}
		v := rapid.Int64().Draw(t, "v")
		same(big.NewInt(v), f.FromInt64(v), "int64")
		u := rapid.Uint64().Draw(t, "u")
		same(new(big.Int).SetUint64(u), f.FromUint64(u), "uint64")
		b := new(big.Int).SetBytes(rapid.SliceOfN(rapid.Byte(), 0, 40).Draw(t, "big"))
		same(new(big.Int).Neg(b), f.FromInt(new(big.Int).Neg(b)), "big integer")
		den := new(big.Int).Add(new(big.Int).SetUint64(u), big.NewInt(1))
		r := new(big.Rat).SetFrac(b, den)
		got, ok := f.FromRat(r)
		require.Equal(t, new(big.Int).Mod(r.Denom(), p).Sign() != 0, ok)
		if ok {
			require.Equal(t, f.FromInt(r.Num()), f.Mul(got, f.FromInt(r.Denom())))
		}
	})
}

func TestNewFieldRefuses(t *testing.T) {
	for _, p := range []uint64{0, 1, 2, 4, 9, 10005, 1 << 61, 1<<62 + 135, 1<<64 - 59} {
		_, err := NewField(p)
		require.ErrorIs(t, err, ErrModulus, "%d", p)
	}
	f, err := NewField(10007)
	require.NoError(t, err)
	require.Equal(t, "GF(10007)", f.String())
	require.Equal(t, uint64(1), f.Uint64(f.One()))
}

func BenchmarkMul(b *testing.B) {
	f := TableField(0)
	x := f.FromUint64(12345)
	for b.Loop() {
		x = f.Mul(x, x)
	}
}

// testFields are the smallest fields, one of middle size, the largest, table
// fields and random ones.
var testFields = func() []*Field {
	fields := []*Field{
		newField(3), newField(5), newField(7), newField(10007),
		newField(1<<31 - 1), newField(1<<61 - 1), newField(1<<62 - 57),
		TableField(0), TableField(1), TableField(7),
	}
	s := NewSource("prime tests", "fields")
	for range 4 {
		fields = append(fields, s.Field())
	}
	return fields
}()

// genElement draws canonical words, the ends 0, 1, p-2, p-1 and the unit often.
func genElement(f *Field) *rapid.Generator[Element] {
	return rapid.OneOf(
		rapid.SampledFrom([]Element{0, 1, f.one, Element(f.p - 2), Element(f.p - 1)}),
		rapid.Map(rapid.Uint64Range(0, f.p-1), func(w uint64) Element { return Element(w) }),
	)
}

// value is the residue that a word stands for, x / 2^64 mod p, by math/big.
func value(f *Field, x Element) *big.Int {
	p := new(big.Int).SetUint64(f.p)
	r := new(big.Int).Lsh(big.NewInt(1), 64)
	r.ModInverse(r, p)
	r.Mul(r, new(big.Int).SetUint64(uint64(x)))
	return r.Mod(r, p)
}

// requireResidue compares a canonical element with an integer modulo p.
func requireResidue(t require.TestingT, f *Field, want *big.Int, got Element) {
	require.Less(t, uint64(got), f.p, "not canonical in %v", f)
	m := new(big.Int).Mod(want, new(big.Int).SetUint64(f.p))
	require.Zero(t, m.Cmp(value(f, got)), "%v: want %v, got %v", f, m, value(f, got))
}

func TestNewFieldAcceptsOddPrimesBelowBound(t *testing.T) {
	for _, f := range testFields {
		g, err := NewField(f.p)
		require.NoError(t, err)
		require.Equal(t, f, g)
		require.Equal(t, f.p, g.Modulus())
	}
	require.Equal(t, "GF(10007)", newField(10007).String())

	above := new(big.Int).Lsh(big.NewInt(1), 62)
	for above.Add(above, big.NewInt(1)); !above.ProbablyPrime(20); above.Add(above, big.NewInt(2)) {
	}
	refused := []uint64{0, 1, 2, 4, 9, 15, 1<<62 - 1, 1 << 62, above.Uint64(), 1<<64 - 59, math.MaxUint64}
	for _, p := range refused {
		f, err := NewField(p)
		require.Nil(t, f, "%d", p)
		require.ErrorIs(t, err, ErrModulus, "%d", p)
		require.False(t, errors.Is(err, ErrBadPrime))
	}
}

// As TestFieldAgainstBig, with the residue of a word taken from the definition
// of the form and not from Field.Uint64.
func TestElementWordsAgainstBig(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.SampledFrom(testFields).Draw(t, "field")
		x, y := genElement(f).Draw(t, "x"), genElement(f).Draw(t, "y")
		p, a, b := new(big.Int).SetUint64(f.p), value(f, x), value(f, y)
		var z big.Int

		requireResidue(t, f, z.Add(a, b), f.Add(x, y))
		requireResidue(t, f, z.Sub(a, b), f.Sub(x, y))
		requireResidue(t, f, z.Neg(a), f.Neg(x))
		requireResidue(t, f, z.Mul(a, b), f.Mul(x, y))
		requireResidue(t, f, z.Mul(a, a), f.Square(x))

		e := rapid.OneOf(rapid.Uint64(), rapid.Uint64Range(0, 5), rapid.Just(f.p-1), rapid.Just(f.p)).Draw(t, "e")
		requireResidue(t, f, z.Exp(a, new(big.Int).SetUint64(e), p), f.Exp(x, e))

		i, ok := f.Inv(y)
		q, okq := f.Div(x, y)
		require.Equal(t, y != 0, ok)
		require.Equal(t, y != 0, okq)
		if y == 0 {
			require.Zero(t, i)
			require.Zero(t, q)
		} else {
			var inverse big.Int
			inverse.ModInverse(b, p)
			requireResidue(t, f, &inverse, i)
			requireResidue(t, f, z.Mul(a, &inverse), q)
		}

		require.Equal(t, a.Uint64(), f.Uint64(x))
		require.Same(t, &z, f.Int(&z, x))
		require.Zero(t, a.Cmp(&z))
	})
}

// Every pair of elements of the small fields.
func TestSmallFieldsExhaustively(t *testing.T) {
	for _, p := range []uint64{3, 5, 7, 31} {
		f := newField(p)
		for a := range p {
			x := f.FromUint64(a)
			require.Equal(t, a, f.Uint64(x))
			require.Equal(t, (p-a)%p, f.Uint64(f.Neg(x)))
			for b := range p {
				y := f.FromUint64(b)
				require.Equal(t, (a+b)%p, f.Uint64(f.Add(x, y)))
				require.Equal(t, (a+p-b)%p, f.Uint64(f.Sub(x, y)))
				require.Equal(t, a*b%p, f.Uint64(f.Mul(x, y)))
				if q, ok := f.Div(x, y); ok {
					require.Equal(t, a, f.Uint64(q)*b%p)
				} else {
					require.Zero(t, b)
				}
			}
		}
	}
}

func TestUnits(t *testing.T) {
	for _, f := range testFields {
		requireResidue(t, f, big.NewInt(1), f.One())
		require.Equal(t, f.One(), f.Exp(0, 0))
		require.Equal(t, Element(0), f.Exp(0, 1))
		require.Equal(t, Element(0), f.Neg(0))
		require.Equal(t, Element(0), f.FromUint64(f.p))
		require.Equal(t, f.Neg(f.One()), f.FromInt64(-1))
	}
}

// genBig draws integers of up to 256 bits of both signs, among them multiples
// of p and their neighbours.
func genBig(f *Field) *rapid.Generator[*big.Int] {
	return rapid.Custom(func(t *rapid.T) *big.Int {
		z := new(big.Int).SetBytes(rapid.SliceOfN(rapid.Byte(), 0, 32).Draw(t, "bytes"))
		if rapid.Bool().Draw(t, "near multiple") {
			z.Mul(z, new(big.Int).SetUint64(f.p))
			z.Add(z, big.NewInt(rapid.Int64Range(-2, 2).Draw(t, "off")))
		}
		if rapid.Bool().Draw(t, "negative") {
			z.Neg(z)
		}
		return z
	})
}

func TestConversionsAgainstBig(t *testing.T) {
	ends := []int64{0, 1, -1, math.MaxInt64, math.MinInt64, math.MinInt64 + 1}
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.SampledFrom(testFields).Draw(t, "field")
		v := rapid.OneOf(rapid.Int64(), rapid.SampledFrom(ends), rapid.SampledFrom([]int64{int64(f.p), -int64(f.p)})).Draw(t, "v")
		requireResidue(t, f, big.NewInt(v), f.FromInt64(v))
		requireResidue(t, f, big.NewInt(v), f.FromInt(big.NewInt(v)))
		u := rapid.Uint64().Draw(t, "u")
		requireResidue(t, f, new(big.Int).SetUint64(u), f.FromUint64(u))
		n := genBig(f).Draw(t, "n")
		kept := new(big.Int).Set(n)
		requireResidue(t, f, n, f.FromInt(n))
		require.Zero(t, kept.Cmp(n), "the argument changed")
	})
}

func TestFromRatAgainstBig(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.SampledFrom(testFields).Draw(t, "field")
		p := new(big.Int).SetUint64(f.p)
		n, d := genBig(f).Draw(t, "n"), genBig(f).Draw(t, "d")
		if d.Sign() == 0 {
			d.SetInt64(1)
		}
		r := new(big.Rat).SetFrac(n, d)
		x, ok := f.FromRat(r)
		var rest big.Int
		if rest.Mod(r.Denom(), p).Sign() == 0 {
			require.False(t, ok)
			require.Zero(t, x)
			return
		}
		require.True(t, ok)
		var want big.Int
		want.ModInverse(r.Denom(), p)
		requireResidue(t, f, want.Mul(&want, r.Num()), x)
	})
}

func TestFromRatRefusesDenominatorDivisibleByP(t *testing.T) {
	for _, f := range testFields {
		p := new(big.Int).SetUint64(f.p)
		for _, m := range []int64{1, -1, 2, 11} {
			d := new(big.Int).Mul(p, big.NewInt(m))
			x, ok := f.FromRat(new(big.Rat).SetFrac(big.NewInt(1), d))
			require.False(t, ok, "%v, 1/%v", f, d)
			require.Zero(t, x)
		}
		// p/(2p) is 1/2, a numerator may vanish
		x, ok := f.FromRat(new(big.Rat).SetFrac(p, new(big.Int).Mul(p, big.NewInt(2))))
		require.True(t, ok)
		require.Equal(t, f.One(), f.Add(x, x))
		x, ok = f.FromRat(new(big.Rat).SetFrac(p, big.NewInt(2)))
		require.True(t, ok)
		require.Zero(t, x)
	}
}
