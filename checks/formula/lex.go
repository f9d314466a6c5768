package formula

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

type kind uint8

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
	symbol       byte // of symbols; 0 for other tokens
	spaced       bool // white space stands before it
	start, end   int  // in bytes
	line, column int  // 1-based, column in characters
}

// lexer splits a text into tokens one by one, so that a text costs no more
// memory than its tree. Names are letters followed by letters, digits and _;
// angle brackets of Unicode are read as < and >.
type lexer struct {
	text string
	at   int // next byte
	line int
	// base makes columns: on the present line, column = offset - base + 1
	base int
}

// class says what a byte begins.
var class = func() (c [256]kind) {
	for b := range c {
		switch {
		case '0' <= b && b <= '9':
			c[b] = tokenNumber
		case 'a' <= b && b <= 'z' || 'A' <= b && b <= 'Z':
			c[b] = tokenName
		case strings.IndexByte("+-*/^(){}[]<>,|.;", byte(b)) >= 0:
			c[b] = tokenSymbol
		default:
			c[b] = tokenBad
		}
	}
	return c
}()

// brackets are the angle brackets of Unicode: mathematical, technical, those of
// East Asian typography, and quotation marks that look alike.
var brackets = map[rune]byte{
	'\u27e8': '<', '\u2329': '<', '\u3008': '<', '\u2039': '<',
	'\u27e9': '>', '\u232a': '>', '\u3009': '>', '\u203a': '>',
}

// next reads a token; at the end of the text tokenEnd, again and again.
func (l *lexer) next() token {
	spaced := l.space()
	t := token{spaced: spaced, start: l.at, end: l.at, line: l.line, column: l.at - l.base + 1}
	if l.at == len(l.text) {
		return t
	}
	b := l.text[l.at]
	t.kind = class[b]
	end := l.at + 1
	switch t.kind {
	case tokenSymbol:
		t.symbol = b
	case tokenNumber:
		for end < len(l.text) && class[l.text[end]] == tokenNumber {
			end++
		}
	case tokenName:
		for end < len(l.text) && (class[l.text[end]] <= tokenName && class[l.text[end]] != tokenEnd || l.text[end] == '_') {
			end++
		}
	default:
		if b >= utf8.RuneSelf {
			r, size := utf8.DecodeRuneInString(l.text[l.at:])
			end = l.at + size
			l.base += size - 1
			if s, ok := brackets[r]; ok {
				t.kind, t.symbol = tokenSymbol, s
			}
		}
	}
	l.at, t.end = end, end
	return t
}

// space passes white space.
func (l *lexer) space() bool {
	from := l.at
	for l.at < len(l.text) {
		b := l.text[l.at]
		switch {
		case b == '\n':
			l.line++
			l.base = l.at + 1
			l.at++
		case b == ' ' || '\t' <= b && b <= '\r':
			l.at++
		case b < utf8.RuneSelf:
			return l.at > from
		default:
			r, size := utf8.DecodeRuneInString(l.text[l.at:])
			if !unicode.IsSpace(r) {
				return l.at > from
			}
			l.base += size - 1
			l.at += size
		}
	}
	return l.at > from
}

func isDigit(r rune) bool { return '0' <= r && r <= '9' }
