package kinematics

import (
	"fmt"
	"math/big"
	"strings"
)

// MaxDigits bounds the decimal digits of a numerator or denominator that is
// read.
const MaxDigits = 4096

// NumberError says why a text is not an exact number.
type NumberError struct{ Reason, Hint string }

func (e *NumberError) Error() string { return e.Reason }

// ParseRational reads an exact rational number, "12" or "-3/7": digits, an
// optional minus sign, an optional denominator that is not zero, no spaces. The
// error is a *NumberError.
func ParseRational(text string) (*big.Rat, error) {
	numerator, denominator, fraction := strings.Cut(strings.TrimPrefix(text, "-"), "/")
	if !digits(numerator) || fraction && !digits(denominator) {
		return nil, notExact(text)
	}
	for _, part := range []string{numerator, denominator} {
		if len(part) > MaxDigits {
			return nil, &NumberError{fmt.Sprintf("a number of %d digits, more than the limit of %d", len(part), MaxDigits), "shorten the number"}
		}
	}
	var n, d big.Int
	n.SetString(numerator, 10)
	d.SetInt64(1)
	if fraction {
		d.SetString(denominator, 10)
		if d.Sign() == 0 {
			return nil, &NumberError{fmt.Sprintf("%q has a zero denominator", text), ""}
		}
	}
	if strings.HasPrefix(text, "-") {
		n.Neg(&n)
	}
	return new(big.Rat).SetFrac(&n, &d), nil
}

// digits reports whether t is one or more decimal digits.
func digits(t string) bool {
	for i := range len(t) {
		if t[i] < '0' || t[i] > '9' {
			return false
		}
	}
	return t != ""
}

// notExact explains a text that is no exact rational number.
func notExact(text string) *NumberError {
	const forms = `write an integer or a fraction in quotes: 12, "12", "-3/7"`
	if len(text) > 40 {
		text = text[:37] + "..."
	}
	if strings.ContainsAny(text, ".eE") {
		if r := decimal(text); r != nil {
			return &NumberError{fmt.Sprintf("%s is a decimal number, not an exact one", text), fmt.Sprintf("if it is meant exactly, write %q", r.RatString())}
		}
		return &NumberError{fmt.Sprintf("%s is not an exact number", text), forms}
	}
	if strings.HasSuffix(text, "i") {
		return &NumberError{fmt.Sprintf("%q is not real: components are rational numbers", text), forms}
	}
	return &NumberError{fmt.Sprintf("%q is not an exact number", text), forms}
}

// decimal returns the exact value of a decimal number that is short enough to
// be worth showing as a fraction, or nil.
func decimal(text string) *big.Rat {
	mantissa, exponent, _ := strings.Cut(strings.ToLower(text), "e")
	if len(mantissa) > 20 || len(exponent) > 2 {
		return nil
	}
	if strings.Trim(mantissa, "-.0123456789") != "" {
		return nil
	}
	r, ok := new(big.Rat).SetString(text)
	if !ok {
		return nil
	}
	return r
}
