package formula

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

type kind int

const (
	tokenEnd kind = iota
	tokenNumber
	tokenName
	tokenSymbol
	tokenBad
)

// token is a piece of text with its place.
type token struct {
	kind         kind
	text         string
	offset       int  // in bytes
	line, column int  // 1-based, column in characters
	spaced       bool // white space stands before it
}

// lex splits a text into tokens; the last one is tokenEnd. Names are letters
// followed by letters, digits and _; angle brackets of Unicode become < and >.
func lex(text string) []token {
	out := make([]token, 0, len(text)/2+2)
	line, column := 1, 1
	spaced := false
	for i := 0; i < len(text); {
		r, size := utf8.DecodeRuneInString(text[i:])
		if r == '\n' {
			line, column, spaced = line+1, 1, true
			i++
			continue
		}
		if unicode.IsSpace(r) {
			column++
			spaced = true
			i += size
			continue
		}
		t := token{offset: i, line: line, column: column, spaced: spaced}
		end := i + size
		switch {
		case isDigit(r):
			t.kind = tokenNumber
			for end < len(text) && isDigit(rune(text[end])) {
				end++
			}
		case isLetter(r):
			t.kind = tokenName
			for end < len(text) && (isLetter(rune(text[end])) || isDigit(rune(text[end])) || text[end] == '_') {
				end++
			}
		case strings.ContainsRune("+-*/^(){}[]<>,|.;", r):
			t.kind = tokenSymbol
		case strings.ContainsRune("⟨〈‹", r):
			t.kind, t.text = tokenSymbol, "<"
		case strings.ContainsRune("⟩〉›", r):
			t.kind, t.text = tokenSymbol, ">"
		default:
			t.kind = tokenBad
		}
		if t.text == "" {
			t.text = text[i:end]
		}
		out = append(out, t)
		column += utf8.RuneCountInString(text[i:end])
		i, spaced = end, false
	}
	return append(out, token{kind: tokenEnd, offset: len(text), line: line, column: column, spaced: spaced})
}

func isDigit(r rune) bool  { return '0' <= r && r <= '9' }
func isLetter(r rune) bool { return 'a' <= r && r <= 'z' || 'A' <= r && r <= 'Z' }
