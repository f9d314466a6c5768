package main

import (
	"fmt"
	"slices"
	"strings"

	"eliminant/checks/diag"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// laterCommands and laterOptions are part of the command line but not present
// yet.
var (
	laterCommands = []string{"limit", "recheck", "diagnose", "reference", "compare"}
	laterOptions  = map[string]bool{ // whether they take a value
		"factors": false, "sectors": false, "roots": true, "near": true, "distance": true, "system": true,
		"square-bracket": true, "nc": true, "average": false, "against": true, "with": true, "run": true,
		"tolerance-digits": true, "write": true, "plot": true, "orders": true, "soft": true, "double-soft": true,
		"collinear": true, "pole": true, "shift": true, "adler": true,
	}
)

// passed are commands whose arguments belong to the command line library.
var passed = []string{"completion", cobra.ShellCompRequestCmd, cobra.ShellCompNoDescRequestCmd}

// arrange brings the arguments into the order options, "--", positional
// arguments, so that a formula may begin with a minus sign and a value of an
// option too. An argument that begins with one minus sign and is not -h is
// positional. It checks the names of commands and options; all mistakes are
// returned together. json tells whether --json is among the options.
func arrange(root *cobra.Command, args []string) (clean []string, json bool, errs diag.List) {
	if len(args) > 0 && slices.Contains(passed, args[0]) {
		return args, false, nil
	}
	if len(args) > 0 && args[0] == "help" {
		args = append(slices.Clone(args[1:]), "--help")
	}
	a := &arranger{root: root, command: root, given: map[string]bool{}}
	a.read(args)
	switch {
	case a.help:
		clean = []string{"--help"}
		if a.command != root {
			clean = []string{a.command.Name(), "--help"}
		}
		if a.unknown {
			return nil, a.json, a.errs
		}
		return clean, a.json, nil
	case a.command != root:
		clean = append(clean, a.command.Name())
	}
	clean = append(clean, a.options...)
	clean = append(clean, "--")
	return append(clean, a.positional...), a.json, a.errs
}

// arranger reads the arguments from left to right.
type arranger struct {
	root, command       *cobra.Command
	named               bool // the command was given
	unknown             bool // by a name that means nothing
	help, json          bool
	options, positional []string
	given               map[string]bool
	errs                diag.List
}

func (a *arranger) fail(code, hint, format string, args ...any) {
	a.errs = append(a.errs, diag.Diagnostic{Code: code, Message: fmt.Sprintf(format, args...), Hint: hint})
}

func (a *arranger) read(args []string) {
	for i := 0; i < len(args); i++ {
		arg := args[i]
		switch {
		case arg == "--":
			for _, rest := range args[i+1:] {
				a.word(rest)
			}
			return
		case arg == "-h":
			a.help = true
		case strings.HasPrefix(arg, "--"):
			next, has := "", i+1 < len(args)
			if has {
				next = args[i+1]
			}
			if a.option(arg[2:], next, has) {
				i++
			}
		default:
			a.word(arg)
		}
	}
}

// word reads the command or a positional argument.
func (a *arranger) word(arg string) {
	if a.named {
		a.positional = append(a.positional, arg)
		return
	}
	a.named = true
	for _, c := range a.root.Commands() {
		if c.Name() == arg && !c.Hidden {
			a.command = c
			return
		}
	}
	a.unknown = true
	if slices.Contains(laterCommands, arg) {
		a.fail("not-available", "commands: "+commandNames(a.root), "the command %s is not available yet", arg)
		return
	}
	hint := "commands: " + commandNames(a.root)
	if near := nearest(arg, strings.Split(commandNames(a.root), ", ")); near != "" {
		hint = fmt.Sprintf("did you mean %s? %s", near, hint)
	}
	a.fail("command", hint, "unknown command %q", short(arg))
}

// option reads --name, --name=value or --name value, and tells whether it took
// the next argument.
func (a *arranger) option(text, next string, has bool) bool {
	name, _, joined := strings.Cut(text, "=")
	flag := a.flag(name)
	switch {
	case name == "help":
		a.help = true
		return false
	case flag == nil:
		return a.noOption(name, joined, next, has)
	case a.given[name]:
		a.fail("option", "give it once", "--%s is given twice", name)
		return false
	}
	a.given[name] = true
	if flag.NoOptDefVal != "" { // a switch
		if joined {
			a.fail("option", "", "--%s takes no value", name)
			return false
		}
		a.json = a.json || name == "json"
		a.options = append(a.options, "--"+text)
		return false
	}
	switch {
	case joined:
	case !has || strings.HasPrefix(next, "--"):
		a.fail("option", flag.Usage, "--%s needs a value", name)
		return false
	default:
		text += "=" + next
	}
	a.options = append(a.options, "--"+text)
	return !joined
}

// noOption reports an option the command does not have.
func (a *arranger) noOption(name string, joined bool, next string, has bool) bool {
	takes, later := laterOptions[name]
	if !later {
		for _, c := range a.root.Commands() {
			if f := c.Flags().Lookup(name); f != nil {
				takes = f.NoOptDefVal == ""
			}
		}
	}
	took := takes && !joined && has && !strings.HasPrefix(next, "--")
	switch {
	case a.unknown: // reported already
	case later:
		a.fail("not-available", "", "the option --%s is not available yet", name)
	default:
		var names []string
		a.command.Flags().VisitAll(func(f *pflag.Flag) { names = append(names, "--"+f.Name) })
		names = append(names, "--json", "--help")
		hint := "options: " + strings.Join(names, ", ")
		if near := nearest("--"+name, names); near != "" {
			hint = fmt.Sprintf("did you mean %s? %s", near, hint)
		}
		where := ""
		if a.command != a.root {
			where = " of " + a.command.Name()
		}
		a.fail("option", hint, "unknown option --%s%s", short(name), where)
	}
	return took
}

func (a *arranger) flag(name string) *pflag.Flag {
	if f := a.command.Flags().Lookup(name); f != nil {
		return f
	}
	return a.root.PersistentFlags().Lookup(name)
}

// commandNames lists the commands present.
func commandNames(root *cobra.Command) string {
	var names []string
	for _, c := range root.Commands() {
		if !c.Hidden && c.Name() != "completion" {
			names = append(names, c.Name())
		}
	}
	slices.Sort(names)
	return strings.Join(names, ", ")
}

// short cuts what a user typed to a length fit for a message.
func short(s string) string {
	if r := []rune(s); len(r) > 60 {
		return string(r[:57]) + "..."
	}
	return s
}

// nearest returns the name that a mistyped word most likely means, or "".
func nearest(word string, names []string) string {
	best, found := 1+max(1, len(word)/3), ""
	for _, n := range names {
		if d := distance(word, n); d < best {
			best, found = d, n
		}
	}
	return found
}

// distance is the number of letters to insert, delete, replace or exchange with
// their neighbour (F. J. Damerau, A technique for computer detection and
// correction of spelling errors, Commun. ACM 7 (1964) 171).
func distance(a, b string) int {
	if len(a) > 60 || len(b) > 60 {
		return 60
	}
	d := make([][]int, len(a)+1)
	for i := range d {
		d[i] = make([]int, len(b)+1)
		d[i][0] = i
	}
	for j := range d[0] {
		d[0][j] = j
	}
	for i := 1; i <= len(a); i++ {
		for j := 1; j <= len(b); j++ {
			change := 1
			if a[i-1] == b[j-1] {
				change = 0
			}
			d[i][j] = min(d[i-1][j]+1, d[i][j-1]+1, d[i-1][j-1]+change)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				d[i][j] = min(d[i][j], d[i-2][j-2]+1)
			}
		}
	}
	return d[len(a)][len(b)]
}
