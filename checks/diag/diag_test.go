package diag_test

import (
	"fmt"
	"testing"

	"eliminant/checks/diag"

	"github.com/stretchr/testify/require"
)

func ExampleDiagnostic_Text() {
	d := diag.Diagnostic{Code: "leg", Message: "leg 7 out of range", File: "claims.toml", Line: 4, Column: 12,
		Hint: "the amplitude has 4 legs", Source: `equal = ["s(1,7)", "0"]`}
	fmt.Println(d.Text())
	// Output:
	// claims.toml:4:12: leg 7 out of range (leg)
	//   equal = ["s(1,7)", "0"]
	//              ^
	//   hint: the amplitude has 4 legs
}

func TestListSorts(t *testing.T) {
	l := diag.List{{Message: "c", File: "b", Line: 1}, {Message: "b", File: "a", Line: 2}, {Message: "a", File: "a", Line: 1, Column: 3}}
	require.Equal(t, "a:1:3: a\na:2: b\nb:1: c", l.Error())
	require.Equal(t, "c", l[0].Message, "Error does not reorder its receiver")
	l.Sort()
	require.Equal(t, "a", l[0].Message)
}

func TestSnippetOfLongLines(t *testing.T) {
	long := ""
	for range 500 {
		long += "x"
	}
	s := diag.Diagnostic{Source: long, Column: 400}.Snippet()
	require.Less(t, len(s), 220)
	require.Empty(t, diag.Diagnostic{Source: "x"}.Snippet())
}

func TestSnippetMarksThePiece(t *testing.T) {
	d := diag.Diagnostic{Source: "s12 + s11", Column: 7, Length: 3}
	require.Equal(t, "  s12 + s11\n        ^~~", d.Snippet())
	d.Length = 50
	require.Equal(t, "  s12 + s11\n        ^~~", d.Snippet(), "the mark ends with the line")
	d.Column = 40
	require.Equal(t, "  s12 + s11\n           ^", d.Snippet(), "a place behind the line is its end")
}

func TestErrorsSpeak(t *testing.T) {
	require.Equal(t, "s12 = 0", (&diag.Undecided{Reason: "s12 = 0"}).Error())
	require.Contains(t, (&diag.Internal{Message: "routes disagree"}).Error(), "routes disagree")
}
