package report

import (
	"math/big"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func TestDecimalExamples(t *testing.T) {
	for _, c := range []struct {
		number string
		digits int
		want   string
	}{
		{"0", 5, "0"},
		{"1", 5, "1"},
		{"-1/3", 5, "-0.33333"},
		{"2/3", 5, "0.66667"},
		{"1/8", 2, "0.12"}, // halves to even
		{"3/8", 2, "0.38"},
		{"999/1000", 2, "1"},
		{"9995/10", 3, "1000"}, // up to 10^21 integers are written out
		{"123456789", 3, "123000000"},
		{"1000000000000000000000000", 5, "1e24"},
		{"1/1000000000", 4, "1e-9"},
		{"-314159/100000000000", 4, "-3.142e-6"},
		{"355/113", 20, "3.1415929203539823009"},
		{"1/99", 1, "0.01"},
	} {
		r, ok := new(big.Rat).SetString(c.number)
		require.True(t, ok)
		got := Decimal(r, c.digits)
		require.Equal(t, c.want, got, "%s to %d digits", c.number, c.digits)
	}
}

// The decimal read back as an exact number is the nearest one with that many
// digits, and agrees with math/big's correctly rounded floating-point text.
func TestDecimalIsNearest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		num := new(big.Int).SetBytes(rapid.SliceOfN(rapid.Byte(), 1, 30).Draw(t, "num"))
		den := new(big.Int).SetBytes(rapid.SliceOfN(rapid.Byte(), 1, 30).Draw(t, "den"))
		if num.Sign() == 0 || den.Sign() == 0 {
			return
		}
		r := new(big.Rat).SetFrac(num, den)
		if rapid.Bool().Draw(t, "negative") {
			r.Neg(r)
		}
		digits := rapid.IntRange(1, 40).Draw(t, "digits")
		text := Decimal(r, digits)
		back, ok := new(big.Rat).SetString(text)
		require.True(t, ok, text)
		mantissa, _, _ := strings.Cut(strings.TrimLeft(strings.Replace(text, ".", "", 1), "-0"), "e")
		require.LessOrEqual(t, len(strings.TrimRight(mantissa, "0")), digits)
		// relative distance at most 10^(1-digits)/2
		off := new(big.Rat).Sub(back, r)
		off.Quo(off.Abs(off), new(big.Rat).Abs(r))
		half := new(big.Rat).SetFrac(big.NewInt(5), power10(digits))
		require.LessOrEqual(t, off.Cmp(half), 0, "%s for %s", text, r)
		f := new(big.Float).SetPrec(2000).SetRat(r)
		want, ok := new(big.Rat).SetString(f.Text('e', digits-1))
		require.True(t, ok)
		// an exact tie goes to the even neighbour here, while the binary
		// expansion that math/big starts from lies on one side of it
		away := new(big.Rat).Sub(want, r)
		if want.Cmp(back) != 0 && away.Abs(away).Cmp(new(big.Rat).Abs(new(big.Rat).Sub(back, r))) == 0 {
			return
		}
		require.Zero(t, want.Cmp(back), "%s, math/big %s", text, f.Text('e', digits-1))
	})
}
