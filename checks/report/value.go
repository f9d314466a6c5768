package report

import (
	"fmt"
	"io"
	"strings"

	"eliminant/checks/claim"
)

// Value is the document of the values of a formula, "eliminant/value/1".
type Value struct {
	Formula  string
	Values   []*claim.PointValue
	Decimals bool // JSON: add the decimal to every value
	Digits   int  // of those decimals, 0 means DefaultDigits
}

type valueDocument struct {
	Format  string       `json:"format"`
	Formula string       `json:"formula"`
	Values  []pointValue `json:"values"`
}

type pointValue struct {
	Point   string       `json:"point"`
	Value   *string      `json:"value"`
	Decimal *string      `json:"decimal,omitempty"`
	Routes  []routeValue `json:"routes"`
	Skipped []skip       `json:"skipped"`
	Agree   bool         `json:"agree"`
}

type routeValue struct {
	Route  string  `json:"route"`
	Value  *string `json:"value"`
	Proof  *string `json:"proof"`
	Reason string  `json:"reason"`
}

type skip struct {
	Route  string `json:"route"`
	Reason string `json:"reason"`
}

// WriteJSON writes the document.
func (v *Value) WriteJSON(w io.Writer) error {
	out := valueDocument{Format: "eliminant/value/1", Formula: v.Formula, Values: []pointValue{}}
	for _, p := range v.Values {
		pv := pointValue{Point: p.Point, Value: exact(p.Value), Routes: []routeValue{}, Skipped: []skip{}, Agree: p.Agree}
		if v.Decimals && p.Value != nil {
			pv.Decimal = text(Decimal(p.Value, Style{Digits: v.Digits}.digits()))
		}
		for _, r := range p.Routes {
			pv.Routes = append(pv.Routes, routeValue{r.Route, exact(r.Value), text(r.Proof), r.Reason})
		}
		for _, k := range p.Skipped {
			pv.Skipped = append(pv.Skipped, skip{k.Route, k.Reason})
		}
		out.Values = append(out.Values, pv)
	}
	return writeJSON(w, out)
}

// WriteText writes, for every point, the exact value, its decimal, and a line a
// route.
func (v *Value) WriteText(w io.Writer, s Style) error {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", s.paint(bold, shorten(v.Formula, 1000)))
	for _, p := range v.Values {
		b.WriteByte('\n')
		writePointValue(&b, p, s)
	}
	_, err := io.WriteString(w, b.String())
	return err
}

func writePointValue(b *strings.Builder, p *claim.PointValue, s Style) {
	switch {
	case p.Value == nil:
		fmt.Fprintf(b, "%s: %s\n", p.Point, s.paint(yellow, "no value"))
	case !p.Agree:
		fmt.Fprintf(b, "%s: %s\n", p.Point, s.paint(red, "the routes disagree"))
	default:
		fmt.Fprintf(b, "%s = %s\n", p.Point, p.Value.RatString())
		if !p.Value.IsInt() {
			fmt.Fprintf(b, "%s ~ %s\n", strings.Repeat(" ", len([]rune(p.Point))), Decimal(p.Value, s.digits()))
		}
	}
	width := 0
	for _, r := range p.Routes {
		width = max(width, len(r.Route))
	}
	for _, k := range p.Skipped {
		width = max(width, len(k.Route))
	}
	for _, r := range p.Routes {
		what := "proof: " + r.Proof
		switch {
		case r.Value == nil:
			what = s.paint(yellow, "no value: "+r.Reason)
		case !p.Agree:
			what = r.Value.RatString() + ", proof: " + r.Proof
		}
		fmt.Fprintf(b, "  %s  %s  (%s)\n", pad(r.Route, width), what, duration(r.Elapsed))
	}
	for _, k := range p.Skipped {
		fmt.Fprintf(b, "  %s  not run: %s\n", pad(k.Route, width), k.Reason)
	}
}
