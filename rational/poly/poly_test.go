package poly

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"testing"
	"time"

	"eliminant/rational/prime"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func Example() {
	f, _ := prime.NewField(10007)
	x := FromInt64(f, -1, 0, 1) // x^2 - 1
	y := FromInt64(f, 1, 1)     // x + 1
	var q, r Poly
	q.DivRem(x, y, &r)
	fmt.Println(&q, "remainder", &r)
	// Output: x+10006 remainder 0
}

func drawField(t *rapid.T) *prime.Field {
	if rapid.Bool().Draw(t, "table prime") {
		return prime.TableField(rapid.IntRange(0, 3).Draw(t, "index"))
	}
	return prime.NewSource("poly", rapid.String().Draw(t, "seed")).Field()
}

func drawPoly(t *rapid.T, f *prime.Field, size int, label string) *Poly {
	src := prime.NewSource(rapid.String().Draw(t, label))
	return random(f, rapid.IntRange(0, size).Draw(t, label+" size"), src)
}

func random(f *prime.Field, size int, src *prime.Source) *Poly {
	z := &Poly{f: f, c: make([]prime.Element, size)}
	for i := range z.c {
		z.c[i] = f.FromUint64(src.Uint64())
	}
	return z.trim()
}

// schoolbook is multiplication by definition.
func schoolbook(x, y *Poly) *Poly {
	f := x.f
	z := &Poly{f: f, c: make([]prime.Element, len(x.c)+len(y.c))}
	for i, a := range x.c {
		for j, b := range y.c {
			z.c[i+j] = f.Add(z.c[i+j], f.Mul(a, b))
		}
	}
	return z.trim()
}

func TestMulAgainstDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		x, y := drawPoly(t, f, 500, "x"), drawPoly(t, f, 300, "y")
		want := schoolbook(x, y)
		require.True(t, new(Poly).Mul(x, y).Equal(want))
		require.True(t, new(Poly).Mul(y, x).Equal(want))
		z := new(Poly).Set(x)
		require.True(t, z.Mul(z, y).Equal(want), "aliased")
		z.Set(x)
		require.True(t, z.Mul(z, z).Equal(schoolbook(x, x)), "square")
	})
}

func TestRing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		x, y, w := drawPoly(t, f, 90, "x"), drawPoly(t, f, 90, "y"), drawPoly(t, f, 90, "w")
		at := f.FromUint64(rapid.Uint64().Draw(t, "at"))
		v := func(p *Poly) prime.Element { return p.Eval(at) }
		require.Equal(t, f.Add(v(x), v(y)), v(new(Poly).Add(x, y)))
		require.Equal(t, f.Sub(v(x), v(y)), v(new(Poly).Sub(x, y)))
		require.Equal(t, f.Neg(v(x)), v(new(Poly).Neg(x)))
		left := new(Poly).Mul(x, new(Poly).Add(y, w))
		right := new(Poly).Add(new(Poly).Mul(x, y), new(Poly).Mul(x, w))
		require.True(t, left.Equal(right))
		// Leibniz
		d := new(Poly).Derivative(new(Poly).Mul(x, y))
		e := new(Poly).Mul(new(Poly).Derivative(x), y)
		e.Add(e, new(Poly).Mul(x, new(Poly).Derivative(y)))
		require.True(t, d.Equal(e))
		require.True(t, new(Poly).Shift(x, 3).Equal(new(Poly).Mul(x, New(f, 0, 0, 0, f.One()))))
	})
}

func TestDivision(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		x, y := drawPoly(t, f, 700, "x"), drawPoly(t, f, 350, "y")
		if y.IsZero() {
			require.Panics(t, func() { new(Poly).DivRem(x, y, new(Poly)) })
			return
		}
		var q, r Poly
		q.DivRem(x, y, &r)
		require.Less(t, r.Degree(), y.Degree()+1)
		if y.Degree() > 0 {
			require.Less(t, r.Degree(), y.Degree())
		}
		require.True(t, new(Poly).Add(schoolbook(&q, y), &r).Equal(x))
		if y.Degree() < 1 {
			return
		}
		m, err := NewModulus(y)
		require.NoError(t, err)
		require.True(t, m.Rem(new(Poly), x).Equal(&r))
		a, b := m.Rem(new(Poly), drawPoly(t, f, 700, "a")), m.Rem(new(Poly), drawPoly(t, f, 700, "b"))
		require.True(t, m.Mul(new(Poly), a, b).Equal(new(Poly).Rem(schoolbook(a, b), y)))
	})
}

func TestGCD(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		x, y, w := drawPoly(t, f, 40, "x"), drawPoly(t, f, 40, "y"), drawPoly(t, f, 20, "w")
		a, b := new(Poly).Mul(x, w), new(Poly).Mul(y, w)
		var g Poly
		u, v := g.XGCD(a, b)
		require.True(t, g.Equal(new(Poly).GCD(a, b)))
		require.True(t, new(Poly).Add(new(Poly).Mul(u, a), new(Poly).Mul(v, b)).Equal(&g))
		if !a.IsZero() && !b.IsZero() && !w.IsZero() {
			require.True(t, new(Poly).Rem(a, &g).IsZero())
			require.True(t, new(Poly).Rem(b, &g).IsZero())
			require.True(t, new(Poly).Rem(&g, new(Poly).Monic(w)).IsZero())
		}
		if b.Degree() < 1 {
			return
		}
		inv, ok := new(Poly).InverseMod(a, b)
		require.Equal(t, g.Degree() == 0, ok)
		if ok {
			require.True(t, new(Poly).Rem(new(Poly).Mul(inv, a), b).Equal(New(f, f.One())))
			require.Less(t, inv.Degree(), b.Degree())
		}
	})
}

func TestInterpolation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		p := drawPoly(t, f, 30, "p")
		n := rapid.IntRange(len(p.c), 40).Draw(t, "nodes")
		x := make([]prime.Element, n)
		for i := range x {
			x[i] = f.FromUint64(uint64(i*i + 3*i))
		}
		q, err := Interpolate(f, x, p.EvalMany(x))
		require.NoError(t, err)
		require.True(t, q.Equal(p))
		if n > 1 {
			x[n-1] = x[0]
			_, err = Interpolate(f, x, make([]prime.Element, n))
			require.ErrorIs(t, err, ErrNodes)
		}
	})
}

func TestRoots(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		want := rapid.SliceOfNDistinct(rapid.Uint64Range(0, 1<<40), 0, 12, rapid.ID).Draw(t, "roots")
		p := New(f, f.One())
		for _, r := range want {
			lin := New(f, f.Neg(f.FromUint64(r)), f.One())
			p.Mul(p, lin)
			if r%3 == 0 {
				p.Mul(p, lin) // repeated roots are found once
			}
		}
		// x^2 - c has no root for a non-square c
		c := f.FromUint64(2)
		for f.Exp(c, (f.Modulus()-1)/2) == f.One() {
			c = f.Add(c, f.One())
		}
		p.Mul(p, New(f, f.Neg(c), 0, f.One()))
		got, err := Roots(context.Background(), p)
		require.NoError(t, err)
		require.Len(t, got, len(want))
		for i, r := range got {
			require.Zero(t, p.Eval(r))
			if i > 0 {
				require.Less(t, f.Uint64(got[i-1]), f.Uint64(r))
			}
		}
	})
	f := prime.TableField(0)
	_, err := Roots(context.Background(), New(f))
	require.Error(t, err)
	stop, cancel := context.WithCancelCause(context.Background())
	why := errors.New("stop")
	cancel(why)
	_, err = Roots(stop, FromInt64(f, 2, -3, 1))
	require.ErrorIs(t, err, why)
}

func TestRecurrence(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawField(t)
		d := rapid.IntRange(0, 40).Draw(t, "degree")
		src := prime.NewSource(rapid.String().Draw(t, "seed"))
		m := random(f, d, src)
		for len(m.c) < d {
			m.c = append(m.c, 0)
		}
		m.c = append(m.c, f.One())
		s := make([]prime.Element, 2*d+rapid.IntRange(0, 10).Draw(t, "more"))
		for i := range s {
			if i < d {
				s[i] = f.FromUint64(src.Uint64())
				continue
			}
			for j := range d {
				s[i] = f.Sub(s[i], f.Mul(m.c[j], s[i-d+j]))
			}
		}
		got := Recurrence(f, s)
		require.Equal(t, f.One(), got.Lead())
		require.LessOrEqual(t, got.Degree(), d)
		require.True(t, new(Poly).Rem(m, got).IsZero(), "the minimal polynomial divides every recurrence")
		for k := 0; k+got.Degree() < len(s); k++ {
			require.Zero(t, f.Dot(got.c, s[k:k+len(got.c)]))
		}
	})
	// Fibonacci numbers: x^2 - x - 1
	f := prime.TableField(1)
	s := []prime.Element{0, f.One(), f.One()}
	for range 5 {
		s = append(s, f.Add(s[len(s)-1], s[len(s)-2]))
	}
	require.True(t, Recurrence(f, s).Equal(FromInt64(f, -1, -1, 1)))
	require.Equal(t, 0, Recurrence(f, make([]prime.Element, 6)).Degree())
}

func TestModulus(t *testing.T) {
	f := prime.TableField(2)
	_, err := NewModulus(FromInt64(f, 5))
	require.ErrorIs(t, err, ErrModulus)
	src := prime.NewSource("modulus")
	m, err := NewModulus(random(f, 300, src))
	require.NoError(t, err)
	x, g := random(f, 299, src), random(f, 20, src)
	direct := New(f)
	for i, c := range g.c {
		term := m.Pow(new(Poly), x, uint64(i))
		direct.Add(direct, term.Scale(c, term))
	}
	require.True(t, m.Compose(new(Poly), g, x).Equal(direct))
	inv := new(Poly)
	require.True(t, m.Inverse(inv, x))
	require.True(t, m.Mul(inv, inv, x).Equal(New(f, f.One())))
	zeroDivisor := new(Poly).GCD(m.Poly(), m.Poly())
	require.False(t, m.Inverse(inv, zeroDivisor))
}

var calibrate = flag.Bool("calibrate", false, "print the sizes at which the multiplication methods change over")

func TestCalibrate(t *testing.T) {
	if !*calibrate {
		return
	}
	src := prime.NewSource("calibrate")
	f := prime.TableField(0)
	timed := func(run func()) time.Duration {
		start, n := time.Now(), 0
		for time.Since(start) < 50*time.Millisecond {
			run()
			n++
		}
		return time.Since(start) / time.Duration(n)
	}
	for size := 16; size <= 512; size += size / 4 {
		x, y := random(f, size, src), random(f, size, src)
		z := make([]prime.Element, 2*size-1)
		n := 1
		for n < 2*size {
			n *= 2
		}
		t.Logf("size %d: columns %v, karatsuba %v, transform %v", size,
			timed(func() { columns(f, z, x.c, reversed(y.c)) }),
			timed(func() { karatsuba(f, x.c, y.c) }),
			timed(func() { transformed(f, x.c, y.c, n) }))
	}
}

func benchmarkSizes(b *testing.B, run func(b *testing.B, f *prime.Field, size int)) {
	for _, size := range []int{120, 720, 5040} {
		b.Run(fmt.Sprintf("N=%d", size), func(b *testing.B) { run(b, prime.TableField(0), size) })
	}
}

func BenchmarkModulusMul(b *testing.B) {
	benchmarkSizes(b, func(b *testing.B, f *prime.Field, size int) {
		src := prime.NewSource("bench")
		m, _ := NewModulus(random(f, size+1, src))
		x, y, z := random(f, size, src), random(f, size, src), new(Poly)
		for b.Loop() {
			m.Mul(z, x, y)
		}
	})
}

func BenchmarkInverse(b *testing.B) {
	benchmarkSizes(b, func(b *testing.B, f *prime.Field, size int) {
		src := prime.NewSource("bench")
		m, _ := NewModulus(random(f, size+1, src))
		x, z := random(f, size, src), new(Poly)
		for b.Loop() {
			m.Inverse(z, x)
		}
	})
}

func BenchmarkRecurrence(b *testing.B) {
	benchmarkSizes(b, func(b *testing.B, f *prime.Field, size int) {
		s := random(f, 2*size, prime.NewSource("bench")).c
		for b.Loop() {
			Recurrence(f, s)
		}
	})
}
