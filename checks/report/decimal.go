package report

import (
	"math/big"
	"strconv"
	"strings"
)

// Decimal writes a rational number with the given number of significant
// digits, at least 1, correctly rounded, halves to even: "0.83333", "-1.25e-9",
// "12". Trailing zeros are dropped. Cost: that of one division of integers with
// as many digits as the number and the result have.
func Decimal(r *big.Rat, digits int) string {
	if r.Sign() == 0 {
		return "0"
	}
	num := new(big.Int).Abs(r.Num())
	// the exponent e of the first digit: 10^e <= |r| < 10^(e+1); the estimate
	// is off by one at most
	e := len(num.String()) - len(r.Denom().String())
	if compareScaled(num, r.Denom(), e) < 0 {
		e--
	}
	n, d := num, r.Denom()
	if shift := digits - 1 - e; shift >= 0 {
		n = new(big.Int).Mul(num, power10(shift))
	} else {
		d = new(big.Int).Mul(d, power10(-shift))
	}
	quotient, rest := new(big.Int).QuoRem(n, d, new(big.Int))
	switch rest.Lsh(rest, 1).Cmp(d) {
	case 1:
		quotient.Add(quotient, big.NewInt(1))
	case 0:
		quotient.Add(quotient, new(big.Int).And(quotient, big.NewInt(1)))
	}
	text := quotient.String()
	if len(text) > digits { // 9.99 became 10.0
		e++
		text = text[:digits]
	}
	text = strings.TrimRight(text, "0")
	sign := ""
	if r.Sign() < 0 {
		sign = "-"
	}
	return sign + place(text, e, digits)
}

// compareScaled compares num/den with 10^e.
func compareScaled(num, den *big.Int, e int) int {
	if e >= 0 {
		return num.Cmp(new(big.Int).Mul(den, power10(e)))
	}
	return new(big.Int).Mul(num, power10(-e)).Cmp(den)
}

func power10(e int) *big.Int {
	return new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(e)), nil)
}

// place puts the decimal point into digits d.ddd times 10^e.
func place(text string, e, digits int) string {
	switch {
	case e < -5 || e >= max(digits, 21):
		out := text[:1]
		if len(text) > 1 {
			out += "." + text[1:]
		}
		return out + "e" + strconv.Itoa(e)
	case e < 0:
		return "0." + strings.Repeat("0", -e-1) + text
	case len(text) <= e+1:
		return text + strings.Repeat("0", e+1-len(text))
	}
	return text[:e+1] + "." + text[e+1:]
}
