package kinematics

import (
	"fmt"
	"strings"
)

// InputError is one thing wrong with kinematics given by a user. Line and
// Column count from 1, in characters; they are 0 where the data came from no
// file, as are Leg and Point where they do not apply.
type InputError struct {
	Code         string // stable, one of the Code constants
	File         string
	Line, Column int
	Point        string // label
	Leg          int
	Message      string // what was expected and what was found
	Hint         string // what to try
}

// Codes of an InputError.
const (
	CodeFile           = "file"           // cannot be read, or too large
	CodeJSON           = "json"           // not JSON
	CodeFormat         = "format"         // not a points file of this version
	CodeKey            = "key"            // unknown, repeated or missing key
	CodeLabel          = "label"          // label empty, repeated or unprintable
	CodeKind           = "kind"           // none or several kinds of kinematics
	CodeNumber         = "number"         // not an exact number, or too long
	CodeShape          = "shape"          // rows and columns do not fit
	CodeLegs           = "legs"           // too few or too many legs
	CodeMetric         = "metric"         // not a string of D signs
	CodeMass           = "mass"           // masses squared do not fit
	CodeOnShell        = "on-shell"       // k^2 is not m^2
	CodeConservation   = "conservation"   // momenta do not add up to zero
	CodeTransversality = "transversality" // e.k is not 0
	CodeSymmetry       = "symmetry"       // a symmetric matrix is not
	CodeDiagonal       = "diagonal"       // a diagonal entry is not zero
	CodeRowSum         = "row-sum"        // a row does not add up
	CodeBracket        = "bracket"        // a bracket vanishes
	CodeConversion     = "conversion"     // a kind that cannot be reached
	CodeFamily         = "family"         // a family where a point is needed
	CodeOption         = "option"         // contradictory options of a generator
	CodeFurther        = "further"        // more errors than are listed
)

// Error returns "file:line:column: point p1: message (hint)" without the parts
// that are unknown.
func (e InputError) Error() string {
	var b strings.Builder
	if e.File != "" {
		b.WriteString(e.File)
		if e.Line > 0 {
			fmt.Fprintf(&b, ":%d:%d", e.Line, e.Column)
		}
		b.WriteString(": ")
	} else if e.Line > 0 {
		fmt.Fprintf(&b, "%d:%d: ", e.Line, e.Column)
	}
	if e.Point != "" {
		fmt.Fprintf(&b, "point %s: ", e.Point)
	}
	b.WriteString(e.Message)
	if e.Hint != "" {
		b.WriteString(" (" + e.Hint + ")")
	}
	return b.String()
}

// InputErrors are all errors of one file or one point, in order of position.
// Every error about input that this package returns is of this type.
type InputErrors []InputError

// Error returns one error per line.
func (l InputErrors) Error() string {
	lines := make([]string, len(l))
	for i, e := range l {
		lines[i] = e.Error()
	}
	return strings.Join(lines, "\n")
}

// inputError returns a list of one error.
func inputError(code, label, hint, format string, args ...any) InputErrors {
	return InputErrors{{Code: code, Point: label, Message: fmt.Sprintf(format, args...), Hint: hint}}
}

// DomainError says that something is not defined at a point: What names the
// invariant or bracket that vanishes there.
type DomainError struct{ What string }

func (e *DomainError) Error() string { return "undefined at this point: " + e.What + " vanishes" }

// place is the position of a value inside a point: a field of the points file
// ("" for the whole point), a row and a column, counted from 0, -1 for all.
type place struct {
	field       string
	row, column int
}

// problem is an InputError before its position in a file is known.
type problem struct {
	code          string
	at            place
	leg           int
	message, hint string
}

// problemErrors gives the problems the label of the point.
func problemErrors(list []problem, label string) error {
	if len(list) == 0 {
		return nil
	}
	out := make(InputErrors, len(list))
	for i, q := range list {
		out[i] = InputError{Code: q.code, Point: label, Leg: q.leg, Message: q.message, Hint: q.hint}
	}
	return out
}
