// Package diag carries what goes wrong to the person who can mend it:
// diagnostics of input with their place, the reasons of undecided answers, and
// internal failures with everything needed to report them.
package diag

import (
	"cmp"
	"fmt"
	"slices"
	"strings"
)

// Diagnostic is one thing wrong with the input.
type Diagnostic struct {
	Code    string // stable, for programs
	Message string // what is wrong and what was expected, one line
	File    string // "" if the input was no file
	Line    int    // 1-based, 0 if unknown
	Column  int    // 1-based, in characters, 0 if unknown
	Length  int    // characters of the wrong piece, for Snippet; 0 counts as 1
	Hint    string // what to try
	Source  string // the line of text it stands in, for Snippet; may be empty
}

// String returns "file:line:column: message (code)".
func (d Diagnostic) String() string {
	var b strings.Builder
	if d.File != "" {
		b.WriteString(d.File)
		b.WriteByte(':')
	}
	if d.Line > 0 {
		fmt.Fprintf(&b, "%d:", d.Line)
		if d.Column > 0 {
			fmt.Fprintf(&b, "%d:", d.Column)
		}
	}
	if b.Len() > 0 {
		b.WriteByte(' ')
	}
	b.WriteString(d.Message)
	if d.Code != "" {
		fmt.Fprintf(&b, " (%s)", d.Code)
	}
	return b.String()
}

// snippetWidth is how much of a source line a snippet shows.
const snippetWidth = 100

// Snippet returns the source line with a mark under the wrong piece, a caret at
// Column and tildes under the rest of Length, or "" if the line is unknown. A
// long line is cut to the part around the mark.
func (d Diagnostic) Snippet() string {
	if d.Source == "" || d.Column < 1 {
		return ""
	}
	runes := []rune(strings.ReplaceAll(d.Source, "\t", " "))
	at := min(d.Column-1, len(runes))
	from := max(0, at-snippetWidth/2)
	to := min(len(runes), from+snippetWidth)
	mark := strings.Repeat(" ", at-from) + "^" + strings.Repeat("~", max(0, min(d.Length, to-at)-1))
	return "  " + string(runes[from:to]) + "\n  " + mark
}

// Text returns the diagnostic for a person: place and message, the source line
// with a caret, the hint.
func (d Diagnostic) Text() string {
	s := d.String()
	if c := d.Snippet(); c != "" {
		s += "\n" + c
	}
	if d.Hint != "" {
		s += "\n  hint: " + d.Hint
	}
	return s
}

// List is everything wrong with an input; a non-empty List is an error.
type List []Diagnostic

// Error returns the diagnostics one a line, in the order of Sort.
func (l List) Error() string {
	sorted := slices.Clone(l)
	sorted.Sort()
	lines := make([]string, len(sorted))
	for i, d := range sorted {
		lines[i] = d.String()
	}
	return strings.Join(lines, "\n")
}

// Sort orders by file, line, column; diagnostics without a place keep their
// order in front.
func (l List) Sort() {
	slices.SortStableFunc(l, func(a, b Diagnostic) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line), cmp.Compare(a.Column, b.Column))
	})
}

// Undecided says that a question has no answer here: degenerate kinematics, a
// pole, a budget that ran out.
type Undecided struct {
	Reason    string
	Invariant string // what vanishes, if that is the reason
}

func (e *Undecided) Error() string { return e.Reason }

// Internal says that the program contradicts itself: two routes disagree or a
// self-check failed. Detail holds what is needed to reproduce it.
type Internal struct {
	Message string
	Detail  map[string]string
}

func (e *Internal) Error() string { return "internal failure: " + e.Message }
