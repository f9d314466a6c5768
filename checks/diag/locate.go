package diag

import (
	"slices"
	"strings"
	"unicode/utf8"
)

// LocateTOML relates the content of a TOML string to the file it stands in. raw
// is the string as written, quotes included, and line and column (1-based, in
// characters) are the place of its first quote; the result takes the offset in
// bytes of a character of the decoded content to its line and column in the
// file. All four kinds of TOML strings are understood, with escapes, trimmed
// line ends and the line end dropped after an opening """. raw is taken to be
// valid TOML; the end of the content is located at the closing quote.
//
// Cost: one pass over raw, then O(log n) a place.
func LocateTOML(raw string, line, column int) func(offset int) (line, column int) {
	quotes := 1
	if len(raw) >= 6 && (strings.HasPrefix(raw, `"""`) || strings.HasPrefix(raw, "'''")) {
		quotes = 3
	}
	w := &walker{raw: raw, line: line, column: column, escapes: strings.HasPrefix(raw, `"`)}
	end := max(len(raw)-quotes, 0)
	w.skip(min(quotes, len(raw)))
	if quotes == 3 {
		w.lineEnd()
	}
	w.runs = append(w.runs, run{0, w.line, w.column})
	for w.at < end {
		w.character(end)
	}
	w.jump()
	runs, text := w.runs, w.decoded.String()
	return func(offset int) (int, int) {
		offset = max(0, min(offset, len(text)))
		i, found := slices.BinarySearchFunc(runs, offset, func(r run, o int) int { return r.offset - o })
		if !found {
			i--
		}
		r := runs[i]
		return r.line, r.column + utf8.RuneCountInString(text[r.offset:offset])
	}
}

// run is a stretch of content that stands in the file as it is decoded, within
// one line: its first byte and where that stands.
type run struct{ offset, line, column int }

// walker reads a TOML string as written.
type walker struct {
	raw          string
	at           int
	line, column int
	escapes      bool
	decoded      strings.Builder
	runs         []run
}

// skip passes n bytes of one line.
func (w *walker) skip(n int) {
	w.column += utf8.RuneCountInString(w.raw[w.at : w.at+n])
	w.at += n
}

// jump begins a new run at the present place.
func (w *walker) jump() {
	r := run{w.decoded.Len(), w.line, w.column}
	if last := len(w.runs) - 1; w.runs[last].offset == r.offset {
		w.runs[last] = r // nothing was decoded in between
		return
	}
	w.runs = append(w.runs, r)
}

// lineEnd passes a line end, if there is one.
func (w *walker) lineEnd() bool {
	n := 0
	switch rest := w.raw[w.at:]; {
	case strings.HasPrefix(rest, "\r\n"):
		n = 2
	case strings.HasPrefix(rest, "\n"):
		n = 1
	default:
		return false
	}
	w.at += n
	w.line, w.column = w.line+1, 1
	return true
}

// character decodes one character, line end or escape before end.
func (w *walker) character(end int) {
	from := w.at
	if w.lineEnd() {
		w.decoded.WriteString(w.raw[from:w.at])
		w.jump()
		return
	}
	if w.escapes && w.raw[w.at] == '\\' && w.at+1 < end {
		w.escape(end)
		w.jump()
		return
	}
	_, size := utf8.DecodeRuneInString(w.raw[w.at:])
	w.skip(size)
	w.decoded.WriteString(w.raw[from:w.at])
}

// short are the escapes of one letter and what they stand for.
var short = map[byte]byte{'b': '\b', 't': '\t', 'n': '\n', 'f': '\f', 'r': '\r', 'e': 0x1b, '"': '"', '\\': '\\'}

// digits is how many hexadecimal digits follow an escape.
var digits = map[byte]int{'x': 2, 'u': 4, 'U': 8}

func (w *walker) escape(end int) {
	c := w.raw[w.at+1]
	if d, ok := short[c]; ok {
		w.decoded.WriteByte(d)
		w.skip(2)
		return
	}
	if n, ok := digits[c]; ok {
		n = min(n, end-w.at-2)
		r := rune(0)
		for _, h := range []byte(w.raw[w.at+2 : w.at+2+n]) {
			r = r<<4 | rune(hexValue(h))
		}
		w.decoded.WriteRune(r)
		w.skip(2 + n)
		return
	}
	// a line-ending backslash trims all white space up to the next character
	w.skip(1)
	for w.at < end {
		if w.lineEnd() {
			continue
		}
		if c := w.raw[w.at]; c != ' ' && c != '\t' {
			break
		}
		w.skip(1)
	}
}

func hexValue(c byte) byte {
	switch {
	case '0' <= c && c <= '9':
		return c - '0'
	case 'a' <= c && c <= 'f':
		return c - 'a' + 10
	case 'A' <= c && c <= 'F':
		return c - 'A' + 10
	}
	return 0
}
