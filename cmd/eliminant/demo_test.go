package main

import (
	"os/exec"
	"regexp"
	"testing"

	"github.com/stretchr/testify/require"
)

const demo = "../../fixtures/demo/"

// verdicts is what the test reads of a verdict document.
type verdicts struct {
	Claims []struct {
		Name, Verdict   string
		FalseAcceptance *string `json:"false_acceptance"`
	}
	Summary struct{ Certified, Refuted, Undecided int }
}

// The demonstration: everything in clean.toml is certified; release.toml is the
// same with two wrong claims more, which are refuted.
func TestDemonstration(t *testing.T) {
	var clean, release verdicts
	o := try(t, "", "certify", demo+"clean.toml", "--json")
	require.Equal(t, exitDone, o.code, o.stderr)
	require.NoError(t, validate(schemaFile("verdicts"), []byte(o.stdout)))
	o.into(t, &clean)
	require.GreaterOrEqual(t, clean.Summary.Certified, 10)
	require.Zero(t, clean.Summary.Refuted+clean.Summary.Undecided)

	o = try(t, "", "certify", demo+"release.toml", "--json")
	require.Equal(t, exitDiffers, o.code, o.stderr)
	require.NoError(t, validate(schemaFile("verdicts"), []byte(o.stdout)))
	o.into(t, &release)
	require.Equal(t, 2, release.Summary.Refuted)
	require.Zero(t, release.Summary.Undecided)
	require.Equal(t, clean.Claims, release.Claims[:len(clean.Claims)])
}

// Fed back to value, the counterexamples of release.toml show two sides that
// differ.
func TestDemonstrationCounterexamples(t *testing.T) {
	o := try(t, "", "certify", demo+"release.toml")
	commands := regexp.MustCompile(`(?m)^      (echo .*)$`).FindAllStringSubmatch(o.stdout, -1)
	require.Len(t, commands, 4)
	var values []string
	for _, c := range commands {
		out, err := exec.Command("sh", "-c", c[1]).CombinedOutput()
		require.NoError(t, err, "%s", out)
		found := regexp.MustCompile(`(?m)^\S+ = (\S+)$`).FindSubmatch(out)
		require.NotNil(t, found, "%s", out)
		values = append(values, string(found[1]))
	}
	require.NotEqual(t, values[0], values[1])
	require.NotEqual(t, values[2], values[3])
}
