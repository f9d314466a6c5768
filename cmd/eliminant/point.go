package main

import (
	"bytes"
	"context"

	"eliminant/checks/claim"
	"eliminant/rational/kinematics"

	"github.com/spf13/cobra"
)

func (p *program) pointCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "point --legs N | --from FILE --as KIND",
		Short: "Make exact on-shell kinematic points, or convert a points file",
		Long: `Make exact on-shell kinematic points and write a points file (JSON). Every
point satisfies momentum conservation and the mass shell exactly, and no
invariant (sum of k)^2 vanishes at it. The same options give the same points.

With --from and --as an existing file is validated and converted to another
kind. Without --out the document goes to stdout.`,
		Example: `  eliminant point --legs 5
  eliminant point --legs 6 --count 10 --seed 7 --kind invariants --out ten.json
  eliminant point --from ten.json --as products
  eliminant point --legs 4 --kind physical --dimension 4`,
		RunE: func(cmd *cobra.Command, args []string) error { return p.point(cmd.Context(), p.intake(cmd), args) },
	}
	drawOptions(c.Flags())
	option(c.Flags(), "from", "FILE", "points file to convert, - for stdin")
	option(c.Flags(), "as", "KIND", "kind to convert to: twistors, spinors, momenta, invariants, products")
	option(c.Flags(), "out", "FILE", "write the points there instead of stdout")
	return c
}

// point draws or converts points.
func (p *program) point(ctx context.Context, in *intake, args []string) error {
	in.none(args)
	d := in.drawing()
	kinds := make([]string, len(kinematics.Kinds))
	for i, k := range kinematics.Kinds {
		kinds[i] = string(k)
	}
	as := kinematics.Kind(in.choice("as", "", kinds))
	convert := in.given("from")
	switch {
	case convert && !in.given("as"):
		in.fail("option", "for instance --as invariants", "--from needs --as, the kind to convert to")
	case !convert && in.given("as"):
		in.fail("option", "add --from FILE, or draw points with --kind", "--as needs --from, the file to convert")
	case !convert && !in.given("legs"):
		in.fail("option", "for instance --legs 5", "point needs --legs, the number of legs")
	}
	if convert {
		for _, name := range []string{"legs", "count", "seed", "kind", "dimension", "metric", "polarisations", "masses-squared"} {
			if in.given(name) {
				in.fail("option", "leave one of them out", "--%s says how to draw points, but --from gives them", name)
			}
		}
	}
	if err := in.err(); err != nil {
		return err
	}
	var points []*kinematics.Point
	if convert {
		for _, q := range in.points(in.text("from")) {
			c, err := q.Convert(as)
			if err != nil {
				in.errs = append(in.errs, claim.PointDiagnostics(err, in.text("from"), 0, 0, "")...)
				continue
			}
			points = append(points, c)
		}
		if err := in.err(); err != nil {
			return err
		}
	} else {
		g := p.progress()
		drawn, err := draw(ctx, d)
		g.stop()
		if err != nil {
			return err
		}
		points = drawn
	}
	var b bytes.Buffer
	if err := kinematics.WritePoints(&b, points); err != nil {
		return err
	}
	if !in.given("out") {
		return p.write(b.Bytes())
	}
	if err := writeFile(in.text("out"), b.Bytes()); err != nil {
		return err
	}
	if p.json {
		return p.write(b.Bytes())
	}
	p.note("wrote %d points of %d legs to %s", len(points), points[0].Legs(), in.text("out"))
	return nil
}
