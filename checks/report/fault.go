package report

import (
	"fmt"
	"io"
	"maps"
	"slices"

	"eliminant/checks/diag"
)

// Fault is the document of wrong input or of an internal failure,
// "eliminant/error/1".
type Fault struct {
	Diagnostics diag.List
	Detail      map[string]string // of an internal failure: what is needed to reproduce it
}

// InternalFault returns the document of an internal failure.
func InternalFault(e *diag.Internal) *Fault {
	return &Fault{
		Diagnostics: diag.List{{Code: "internal", Message: e.Error(),
			Hint: "the program contradicts itself: nothing it printed in this run should be relied on; please report it with what is shown here"}},
		Detail: e.Detail,
	}
}

type faultDocument struct {
	Format      string            `json:"format"`
	Diagnostics []faultDiagnostic `json:"diagnostics"`
	Detail      map[string]string `json:"detail,omitempty"`
}

type faultDiagnostic struct {
	Code    string `json:"code"`
	Message string `json:"message"`
	File    string `json:"file"`
	Line    int    `json:"line"`
	Column  int    `json:"column"`
	Hint    string `json:"hint"`
}

// WriteJSON writes the document. Line and column are 0 and the file empty where
// they do not apply.
func (f *Fault) WriteJSON(w io.Writer) error {
	out := faultDocument{Format: "eliminant/error/1", Diagnostics: []faultDiagnostic{}, Detail: f.Detail}
	for _, d := range f.sorted() {
		out.Diagnostics = append(out.Diagnostics, faultDiagnostic{d.Code, d.Message, d.File, d.Line, d.Column, d.Hint})
	}
	return writeJSON(w, out)
}

// WriteText writes one paragraph a diagnostic: place and message, the line of
// the source, the hint.
func (f *Fault) WriteText(w io.Writer, s Style) error {
	for _, d := range f.sorted() {
		if _, err := fmt.Fprintln(w, s.paint(red, "error:"), d.Text()); err != nil {
			return err
		}
	}
	for _, key := range slices.Sorted(maps.Keys(f.Detail)) {
		if _, err := fmt.Fprintf(w, "  %s: %s\n", key, f.Detail[key]); err != nil {
			return err
		}
	}
	return nil
}

func (f *Fault) sorted() diag.List {
	l := slices.Clone(f.Diagnostics)
	l.Sort()
	return l
}
