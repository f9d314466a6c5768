package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"eliminant/checks/claim"
	"eliminant/checks/diag"
	"eliminant/checks/report"
	"eliminant/rational/kinematics"

	"github.com/spf13/cobra"
)

func (p *program) certifyCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "certify FILE",
		Short: "Settle the claims of a file: certified, refuted or undecided",
		Long: `Settle the claims of a TOML file. Every claim is certified with a proven bound
on accepting a false one, refuted with an exact point at which its two sides
differ, or undecided with the reason. Exit code 0 if all are certified, 1 if one
is refuted, 3 if one is undecided.

A claim is an equality or a relation:

  [[claim]]
  name  = "two orderings"
  equal = ["BS(1,2,3,4|1,3,2,4)", "1/s23"]

  [[claim]]
  name     = "photon decoupling"
  relation = "u1-decoupling"
  of       = "BS(1,2,3,4,5|1,2,3,4,5)"

Relations: cyclicity, reflection, u1-decoupling, kleiss-kuijf, bcj, routes,
moebius. Further keys: legs, points, masses_squared; before the first claim:
title, seed, false_acceptance, and a table [define] of names.`,
		Example: `  cat > claims.toml <<'END'
  title = "Release check"
  [[claim]]
  name     = "photon decoupling"
  relation = "u1-decoupling"
  of       = "BS(1,2,3,4,5|1,2,3,4,5)"
  END
  eliminant certify claims.toml
  eliminant certify claims.toml --json --out results`,
		RunE: func(cmd *cobra.Command, args []string) error { return p.certify(cmd.Context(), p.intake(cmd), args) },
	}
	option(c.Flags(), "out", "DIR", "write the verdicts (JSON) and every counterexample's points file there")
	option(c.Flags(), "seed", "S", "integer that replaces the seed of the file")
	option(c.Flags(), "jobs", "N", "claims settled at the same time, never changes the result (default: number of cores)")
	return c
}

// certify settles the claims of a file.
func (p *program) certify(ctx context.Context, in *intake, args []string) error {
	path, ok := in.one(args, "a claims file", "eliminant certify claims.toml")
	seed, jobs := in.seed(), in.jobs()
	var file *claim.File
	if ok {
		loaded, err := claim.Load(path)
		var list diag.List
		switch {
		case asError(err, &list):
			in.errs = append(in.errs, list...)
		case err != nil:
			return err
		}
		file = loaded
	}
	out := in.text("out")
	if in.given("out") && len(in.errs) == 0 {
		var list diag.List
		if asError(prepareFolder(out), &list) {
			in.errs = append(in.errs, list...)
		}
	}
	if err := in.err(); err != nil {
		return err
	}
	if in.given("seed") {
		file.Seed = seed
	}
	g := p.progress()
	settled, err := claim.Settle(ctx, file, claim.Options{Jobs: jobs,
		Progress: func(done, total int, name string) { g.update(done, total, "claims") }})
	g.stop()
	stopped := err != nil && ctx.Err() != nil
	if err != nil && !stopped {
		return err
	}
	verdicts := &report.Verdicts{Report: settled, Program: p.name}
	if err := p.show(verdicts, 0); err != nil {
		return err
	}
	if in.given("out") {
		if err := keep(out, verdicts); err != nil {
			return err
		}
		p.note("results are in %s", out)
	}
	if stopped {
		done := 0
		for _, r := range settled.Claims {
			if r.Verdict != "" {
				done++
			}
		}
		p.note("interrupted: the verdicts on %d of %d claims are kept", done, len(settled.Claims))
		return exit(exitInterrupted)
	}
	switch {
	case settled.Summary.Refuted > 0:
		return exit(exitDiffers)
	case settled.Summary.Undecided > 0:
		return exit(exitUndecided)
	}
	return nil
}

// keep writes the verdict document and the points file of every
// counterexample, numbered like the claims; those of an earlier run go.
func keep(folder string, v *report.Verdicts) error {
	var b bytes.Buffer
	for i, r := range v.Claims {
		path := filepath.Join(folder, fmt.Sprintf("counterexample-%d.json", i+1))
		if r.Counterexample == nil {
			if err := os.Remove(path); err != nil && !errors.Is(err, os.ErrNotExist) {
				return diag.List{{Code: "unwritable", File: path, Message: "cannot be removed: " + plain(err)}}
			}
			continue
		}
		b.Reset()
		if err := kinematics.WritePoints(&b, []*kinematics.Point{r.Counterexample.Point}); err != nil {
			return err
		}
		if err := writeFile(path, b.Bytes()); err != nil {
			return err
		}
	}
	b.Reset()
	if err := v.WriteJSON(&b); err != nil {
		return err
	}
	return writeFile(filepath.Join(folder, "verdicts.json"), b.Bytes())
}
