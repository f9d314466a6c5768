package report

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"eliminant/checks/claim"
	"eliminant/rational/kinematics"
)

// Verdicts is the document of a settled claims file, "eliminant/verdicts/1".
type Verdicts struct {
	*claim.Report
	Program string // how the commands that reproduce a side begin; "" means eliminant
}

type verdictsDocument struct {
	Format     string         `json:"format"`
	Title      string         `json:"title"`
	Claims     []verdictClaim `json:"claims"`
	Unfinished []string       `json:"unfinished,omitempty"`
	Summary    verdictCounts  `json:"summary"`
}

type verdictCounts struct {
	Certified int `json:"certified"`
	Refuted   int `json:"refuted"`
	Undecided int `json:"undecided"`
}

type verdictClaim struct {
	Name            string          `json:"name"`
	Verdict         string          `json:"verdict"`
	FalseAcceptance *string         `json:"false_acceptance"`
	Rounds          int             `json:"rounds"`
	Routes          []string        `json:"routes"`
	Reason          string          `json:"reason"`
	Counterexample  *counterexample `json:"counterexample"`
}

type counterexample struct {
	Point    json.RawMessage `json:"point"`
	Formulas [2]string       `json:"formulas"`
	Sides    [2]string       `json:"sides"`
	Ratio    *string         `json:"ratio"`
}

// WriteJSON writes the document. Claims without a verdict, which an interrupted
// run leaves, are named under "unfinished" and not counted.
func (v *Verdicts) WriteJSON(w io.Writer) error {
	out := verdictsDocument{Format: "eliminant/verdicts/1", Title: v.Title, Claims: []verdictClaim{}}
	for _, r := range v.Claims {
		if r.Verdict == "" {
			out.Unfinished = append(out.Unfinished, r.Name)
			continue
		}
		c := verdictClaim{Name: r.Name, Verdict: string(r.Verdict), FalseAcceptance: text(r.FalseAcceptance),
			Rounds: r.Rounds, Routes: append([]string{}, r.Routes...), Reason: r.Reason}
		if x := r.Counterexample; x != nil {
			p, err := rawPoint(x.Point)
			if err != nil {
				return err
			}
			c.Counterexample = &counterexample{p, x.Formulas, x.Sides, text(x.Ratio)}
		}
		out.Claims = append(out.Claims, c)
	}
	n := v.counts()
	out.Summary = verdictCounts{n.Certified, n.Refuted, n.Undecided}
	return writeJSON(w, out)
}

// counts counts the verdicts that there are.
func (v *Verdicts) counts() claim.Summary {
	var n claim.Summary
	for _, r := range v.Claims {
		switch r.Verdict {
		case claim.Certified:
			n.Certified++
		case claim.Refuted:
			n.Refuted++
		case claim.Undecided:
			n.Undecided++
		}
	}
	return n
}

// widest is the width up to which names of claims are aligned.
const widest = 60

// WriteText writes one line a claim: verdict, name, proof, routes, time; for a
// refutation the two sides, their ratio and the commands that reproduce them;
// and a closing count.
func (v *Verdicts) WriteText(w io.Writer, s Style) error {
	var b strings.Builder
	if v.Title != "" {
		fmt.Fprintf(&b, "%s\n\n", s.paint(bold, v.Title))
	}
	names, proofs := 0, 0
	for _, r := range v.Claims {
		names = max(names, min(widest, utf8.RuneCountInString(r.Name)))
		if r.Verdict != "" {
			proofs = max(proofs, min(widest, utf8.RuneCountInString(proof(&r))))
		}
	}
	for _, r := range v.Claims {
		if r.Verdict == "" {
			continue
		}
		colour := map[claim.Verdict]string{claim.Certified: green, claim.Refuted: red, claim.Undecided: yellow}[r.Verdict]
		fmt.Fprintf(&b, "%s  %s  %s  %s  %s\n", s.paint(colour, pad(string(r.Verdict), len(claim.Certified))),
			pad(r.Name, names), pad(proof(&r), proofs), strings.Join(r.Routes, " + "), duration(r.Elapsed))
		if r.Counterexample != nil {
			if err := v.writeCounterexample(&b, r.Counterexample); err != nil {
				return err
			}
		}
	}
	b.WriteString("\n" + v.closing(s) + "\n")
	_, err := io.WriteString(w, b.String())
	return err
}

// proof says in words why a verdict can be trusted.
func proof(r *claim.Result) string {
	switch {
	case r.Verdict == claim.Certified && r.FalseAcceptance == "0":
		return "exact at " + count(r.Rounds, "point")
	case r.Verdict == claim.Certified:
		return "false acceptance < " + r.FalseAcceptance + " in " + count(r.Rounds, "round")
	}
	return r.Reason
}

func (v *Verdicts) writeCounterexample(b *strings.Builder, x *claim.Counterexample) error {
	for i, side := range []string{"left ", "right"} {
		fmt.Fprintf(b, "    %s  %s = %s\n", side, shorten(x.Formulas[i], 200), x.Sides[i])
	}
	if x.Ratio != "" {
		fmt.Fprintf(b, "    ratio  %s\n", x.Ratio)
	}
	b.WriteString("    reproduce each side:\n")
	for i := range x.Formulas {
		command, err := Reproduce(v.Program, x.Formulas[i], x.Point)
		if err != nil {
			return err
		}
		fmt.Fprintf(b, "      %s\n", command)
	}
	return nil
}

// longestArgument is the length above which a formula goes through a file:
// systems limit an argument to 128 KiB.
const longestArgument = 100_000

// Reproduce returns the shell command that evaluates a formula at a point.
func Reproduce(program, formula string, p *kinematics.Point) (string, error) {
	var document, compact bytes.Buffer
	if err := kinematics.WritePoints(&document, []*kinematics.Point{p}); err != nil {
		return "", err
	}
	if err := json.Compact(&compact, document.Bytes()); err != nil {
		return "", err
	}
	if program == "" {
		program = "eliminant"
	}
	argument := ShellQuote(formula)
	first := ""
	if len(formula) > longestArgument {
		first, argument = say(formula)+" > side.formula; ", "@side.formula"
	}
	return fmt.Sprintf("%s%s | %s value %s --points -", first, say(compact.String()), program, argument), nil
}

// say writes the command that prints a text. Some shells' echo interprets
// backslashes.
func say(text string) string {
	if strings.Contains(text, `\`) {
		return `printf '%s\n' ` + ShellQuote(text)
	}
	return "echo " + ShellQuote(text)
}

// closing counts the verdicts.
func (v *Verdicts) closing(s Style) string {
	n := v.counts()
	parts := []string{s.paint(green, fmt.Sprintf("%d certified", n.Certified))}
	if n.Refuted > 0 {
		parts = append(parts, s.paint(red, fmt.Sprintf("%d refuted", n.Refuted)))
	}
	if n.Undecided > 0 {
		parts = append(parts, s.paint(yellow, fmt.Sprintf("%d undecided", n.Undecided)))
	}
	if rest := len(v.Claims) - n.Certified - n.Refuted - n.Undecided; rest > 0 {
		parts = append(parts, s.paint(yellow, fmt.Sprintf("%d not finished", rest)))
	}
	return count(len(v.Claims), "claim") + ": " + strings.Join(parts, ", ")
}
