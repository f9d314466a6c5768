package main

import (
	"os"
	"os/exec"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

// Every example of the help runs as it stands, line after line in one folder.
func TestExamplesRun(t *testing.T) {
	for _, c := range (&program{}).root().Commands() {
		t.Run(c.Name(), func(t *testing.T) {
			lines := strings.Split(c.Example, "\n")
			for i := range lines {
				lines[i] = strings.TrimPrefix(lines[i], "  ")
			}
			shell := exec.Command("sh", "-e", "-c", strings.Join(lines, "\n"))
			shell.Dir = t.TempDir()
			shell.Env = append(os.Environ(), "NO_COLOR=1")
			out, err := shell.CombinedOutput()
			require.NoError(t, err, "%s\n%s", strings.Join(lines, "\n"), out)
			require.NotEmpty(t, out)
		})
	}
}

// The three commands that the bare program names run too, with a claims file.
func TestIntroductionRuns(t *testing.T) {
	o := try(t, "")
	require.Zero(t, o.code)
	require.Empty(t, o.stderr)
	require.Equal(t, introduction+"\n", o.stdout)
	var commands []string
	for _, line := range strings.Split(o.stdout, "\n") {
		if strings.HasPrefix(line, "  eliminant ") {
			command, _, _ := strings.Cut(strings.TrimSpace(line), "   ")
			command, _, _ = strings.Cut(command, "  ")
			commands = append(commands, command)
		}
	}
	require.Len(t, commands, 3)
	folder := t.TempDir()
	require.NoError(t, os.WriteFile(folder+"/claims.toml", []byte("[[claim]]\nname = \"a\"\nequal = [\"s12\", \"s34\"]\nlegs = 4\n"), 0o666))
	for _, command := range commands {
		shell := exec.Command("sh", "-c", command)
		shell.Dir = folder
		out, err := shell.CombinedOutput()
		require.NoError(t, err, "%s\n%s", command, out)
	}
}

// The examples of the conventions are identities: certify them.
func TestConventionsHold(t *testing.T) {
	var claims strings.Builder
	for _, s := range sections() {
		if s.Title != "Examples" {
			continue
		}
		for _, line := range s.Lines {
			left, right, ok := strings.Cut(line, " = ")
			require.True(t, ok, line)
			claims.WriteString("[[claim]]\nname = '" + line + "'\nequal = ['" + left + "', '" + right + "']\n")
		}
	}
	o := try(t, "", "certify", file(t, "conventions.toml", claims.String()))
	require.Zero(t, o.code, o.stdout+o.stderr)
	require.Contains(t, o.stdout, "6 certified")
}
