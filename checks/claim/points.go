package claim

import (
	"errors"
	"fmt"

	"eliminant/checks/diag"
	"eliminant/rational/kinematics"
)

// PointDiagnostics turns the errors of reading points into diagnostics. file is
// used where an error does not name its own; line, column and from (a claims
// file, may be empty) say who asked for the points.
func PointDiagnostics(err error, file string, line, column int, from string) diag.List {
	var many kinematics.InputErrors
	if !errors.As(err, &many) {
		d := diag.Diagnostic{Code: "points", File: file, Message: err.Error()}
		if from != "" {
			d.File, d.Line, d.Column = from, line, column
		}
		return diag.List{d}
	}
	var out diag.List
	for _, e := range many {
		d := diag.Diagnostic{Code: e.Code, File: e.File, Line: e.Line, Column: e.Column, Message: e.Message, Hint: e.Hint}
		if d.File == "" {
			d.File = file
		}
		if d.Line == 0 && from != "" {
			// the file as a whole: say who asked for it
			d.Message = d.File + ": " + d.Message
			d.File, d.Line, d.Column = from, line, column
		}
		if e.Point != "" {
			d.Message = fmt.Sprintf("point %s: %s", e.Point, d.Message)
		}
		out = append(out, d)
	}
	return out
}
