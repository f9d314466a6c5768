package prime

import (
	"fmt"
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
