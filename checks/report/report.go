// Package report writes results: as text for a person, and as JSON documents
// for programs.
//
// Every document has a format of its own, "eliminant/value/1" and so on, is
// deterministic, and gives exact numbers as strings in lowest terms. Times stand
// in the text only, so the JSON of the same input is the same bytes every time.
package report

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"math/big"
	"strings"
	"time"
	"unicode/utf8"

	"eliminant/rational/kinematics"
)

// Document is a result that can be written both ways.
type Document interface {
	WriteText(w io.Writer, s Style) error
	WriteJSON(w io.Writer) error
}

// Style says how text is written; the zero value is plain.
type Style struct {
	Colour bool // ANSI colours; the words alone carry the meaning
	Digits int  // significant digits of decimals, 0 means DefaultDigits
}

// DefaultDigits is the number of significant digits of a decimal.
const DefaultDigits = 17

// digits returns the number of significant digits to print.
func (s Style) digits() int {
	if s.Digits <= 0 {
		return DefaultDigits
	}
	return s.Digits
}

// The colours used.
const (
	red    = "31"
	green  = "32"
	yellow = "33"
	bold   = "1"
)

// paint colours a text if colours are wanted.
func (s Style) paint(colour, text string) string {
	if !s.Colour {
		return text
	}
	return "\x1b[" + colour + "m" + text + "\x1b[0m"
}

// writeJSON writes a document, indented, without escaping of < > &.
func writeJSON(w io.Writer, document any) error {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	if err := e.Encode(document); err != nil {
		return err
	}
	_, err := w.Write(joinRows(b.Bytes()))
	return err
}

// joinRows puts every array of an indented document that holds only numbers,
// strings and words onto one line, so that a matrix has a line a row.
func joinRows(indented []byte) []byte {
	out := make([]byte, 0, len(indented))
	open := -1 // where the innermost array begins in out, -1 after any bracket closed
	quoted := false
	for i := 0; i < len(indented); i++ {
		c := indented[i]
		out = append(out, c)
		switch {
		case quoted && c == '\\':
			i++
			out = append(out, indented[i])
		case c == '"':
			quoted = !quoted
		case quoted:
		case c == '[':
			open = len(out) - 1
		case c == '{' || c == '}':
			open = -1
		case c == ']':
			if open >= 0 {
				row := joined(out[open:])
				out = append(out[:open], row...)
			}
			open = -1
		}
	}
	return out
}

// joined removes line breaks and indentation from an array: strings of a JSON
// document have no line breaks in them.
func joined(array []byte) []byte {
	lines := bytes.Split(array, []byte("\n"))
	for i, l := range lines {
		lines[i] = bytes.TrimLeft(l, " ")
	}
	var b bytes.Buffer
	for i, l := range lines {
		if i > 1 && i < len(lines)-1 {
			b.WriteByte(' ')
		}
		b.Write(l)
	}
	return b.Bytes()
}

// exact writes a number in lowest terms, nil as JSON null.
func exact(r *big.Rat) *string {
	if r == nil {
		return nil
	}
	return text(r.RatString())
}

// text returns a JSON string, or null for the empty one.
func text(s string) *string {
	if s == "" {
		return nil
	}
	return &s
}

// rawPoint returns the point as it stands in a points file.
func rawPoint(p *kinematics.Point) (json.RawMessage, error) {
	if p == nil {
		return nil, nil
	}
	return p.MarshalJSON()
}

// pad appends spaces up to a width in characters.
func pad(s string, width int) string {
	return s + strings.Repeat(" ", max(0, width-utf8.RuneCountInString(s)))
}

// shorten cuts a text to a width in characters and marks the cut.
func shorten(s string, width int) string {
	if utf8.RuneCountInString(s) <= width {
		return s
	}
	return string([]rune(s)[:width-3]) + "..."
}

// duration writes a time with three significant digits.
func duration(d time.Duration) string {
	switch {
	case d < time.Millisecond:
		return fmt.Sprintf("%d µs", d.Microseconds())
	case d < time.Second:
		return fmt.Sprintf("%.3g ms", float64(d.Microseconds())/1000)
	case d < 100*time.Second:
		return fmt.Sprintf("%.3g s", d.Seconds())
	}
	return d.Round(time.Second).String()
}

// count writes a number with its noun: "1 claim", "2 claims".
func count(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

// ShellQuote writes a text so that a POSIX shell passes it on unchanged.
func ShellQuote(s string) string {
	return "'" + strings.ReplaceAll(s, "'", `'\''`) + "'"
}
