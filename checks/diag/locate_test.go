package diag_test

import (
	"fmt"
	"strings"
	"testing"
	"unicode/utf8"

	"eliminant/checks/diag"

	"github.com/pelletier/go-toml/v2"
	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func ExampleLocateTOML() {
	// line 3 of the file is:  of = "s12\t+ x"
	place := diag.LocateTOML(`"s12\t+ x"`, 3, 6)
	fmt.Println(place(strings.Index("s12\t+ x", "x")))
	// Output: 3 14
}

// decode is what a TOML decoder makes of the string.
func decode(t require.TestingT, raw string) string {
	var v struct{ X string }
	require.NoError(t, toml.Unmarshal([]byte("X = "+raw+"\n"), &v), "%q", raw)
	return v.X
}

// at returns what stands in a text at a place.
func at(text string, line, column int) string {
	lines := strings.Split(text, "\n")
	return string([]rune(lines[line-1])[column-1:])
}

func TestLocateTOML(t *testing.T) {
	for _, raw := range []string{
		`"s12+x"`, `'s12\n+x'`, `"\"s12\" + x"`, `"\u27e812\u27E9x"`, `"\U000027e8x"`, `"⟨12⟩ x"`, `"a\tx"`,
		"\"\"\"\nfirst\nsecond x\"\"\"", "'''\r\nfirst\r\nsecond x'''", "\"\"\"first \\\n   \n\t second x\"\"\"",
		"\"\"\"one \\n two\n \\\"\\\"\\\" x\"\"\"", "''''quoted' x'''", "\"\"\"x\"\"\"",
	} {
		content := decode(t, raw)
		file := "a = 1\nb = " + raw + "\n"
		place := diag.LocateTOML(raw, 2, 5)
		line, column := place(strings.LastIndex(content, "x"))
		require.True(t, strings.HasPrefix(at(file, line, column), "x"), "%q: %d:%d", raw, line, column)
		line, column = place(len(content))
		require.True(t, strings.HasPrefix(at(file, line, column), raw[len(raw)-1:]), "%q: the end is the closing quote", raw)
	}
	line, column := diag.LocateTOML("", 7, 3)(5)
	require.Equal(t, []int{7, 3}, []int{line, column}, "nothing to locate in")
}

// Every character that stands in the file as itself is found there, whatever
// stands before it; the decoder is an independent reading of the string.
func TestLocateTOMLFindsEveryCharacter(t *testing.T) {
	pieces := map[string][]string{
		`"`:   {"s12", " + ", `\t`, `\"`, `\\`, `\u27e8`, `\U0001F600`, "⟨", "é", "(", "x"},
		`'`:   {"s12", " + ", `\`, `"`, "⟨", "x", "/"},
		`"""`: {"s12", "\n", "\r\n", " \\\n  ", "\\  \n\n x", `\n`, `\u00e9`, "⟩", " ", "x", `\"`},
		`'''`: {"s12", "\n", "\r\n", `\n`, "⟩", " ", "x"},
	}
	rapid.Check(t, func(t *rapid.T) {
		quote := rapid.SampledFrom([]string{`"`, `'`, `"""`, `'''`}).Draw(t, "quote")
		raw := quote + strings.Join(rapid.SliceOfN(rapid.SampledFrom(pieces[quote]), 0, 12).Draw(t, "pieces"), "") + quote
		content := decode(t, raw)
		file := "\n\n  key = " + raw + " # comment\n"
		place := diag.LocateTOML(raw, 3, 9)
		lastLine, lastColumn := 0, 0
		for offset, r := range content {
			line, column := place(offset)
			require.True(t, line > lastLine || line == lastLine && column > lastColumn, "%q: places increase", raw)
			lastLine, lastColumn = line, column
			if r == '\n' || r == '\r' || r == '\t' {
				continue
			}
			there := at(file, line, column)
			if !strings.HasPrefix(there, `\`) || quote[0] == '\'' {
				got, _ := utf8.DecodeRuneInString(there)
				require.Equal(t, string(r), string(got), "%q at %d:%d", raw, line, column)
			}
		}
	})
}
