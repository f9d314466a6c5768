package main

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"strings"

	"github.com/spf13/cobra"
)

//go:embed conventions.txt
var conventions string

func (p *program) conventionsCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "conventions",
		Short: "Print the conventions all values are in",
		Long: `Print the conventions all values are in: metric, invariants, spinors, gauge,
signs and factors of every building block and amplitude.`,
		Example: `  eliminant conventions
  eliminant conventions --json`,
		RunE: func(cmd *cobra.Command, args []string) error {
			in := p.intake(cmd)
			in.none(args)
			if err := in.err(); err != nil {
				return err
			}
			if p.json {
				return p.conventionsJSON()
			}
			return p.write([]byte(conventions))
		},
	}
}

// section is one part of the conventions.
type section struct {
	Title string   `json:"title"`
	Lines []string `json:"lines"`
}

// sections splits the conventions: a line that is not indented is a title.
func sections() []section {
	var out []section
	for _, line := range strings.Split(strings.TrimSpace(conventions), "\n") {
		switch {
		case line == "":
		case !strings.HasPrefix(line, " "):
			out = append(out, section{Title: line})
		default:
			s := &out[len(out)-1]
			s.Lines = append(s.Lines, strings.TrimSpace(line))
		}
	}
	return out
}

func (p *program) conventionsJSON() error {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	err := e.Encode(struct {
		Format   string    `json:"format"`
		Sections []section `json:"sections"`
	}{"eliminant/conventions/1", sections()})
	if err != nil {
		return err
	}
	return p.write(b.Bytes())
}
