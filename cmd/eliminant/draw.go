package main

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"eliminant/checks/diag"
	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"

	"github.com/spf13/pflag"
)

// maxCount is how many points may be drawn at once.
const maxCount = 100000

// drawOptions declares the options of drawing points.
func drawOptions(f *pflag.FlagSet) {
	option(f, "legs", "N", "number of legs of drawn points")
	option(f, "count", "M", "number of points to draw (default 1)")
	option(f, "seed", "S", "integer that fixes the random draws (default 1)")
	option(f, "kind", "KIND", "kind of drawn points: "+strings.Join(generate.Kinds, ", ")+" (default spinors, or momenta if another option needs them)")
	option(f, "dimension", "D", "dimension of drawn momenta (default 4)")
	option(f, "metric", "SIGNS", "metric of drawn momenta, for instance +--- (default mostly minus)")
	f.Bool("polarisations", false, "draw polarisations too")
	option(f, "masses-squared", "Q", "mass squared of all legs of drawn points (default massless)")
}

// pointOptions declares the options of commands that evaluate at points.
func pointOptions(f *pflag.FlagSet) {
	option(f, "points", "FILE", "points file to evaluate at, - for stdin (default: points are drawn)")
	drawOptions(f)
	option(f, "jobs", "N", "number of workers, never changes the result (default: number of cores)")
}

// drawing is a request for points: a file, or what to draw.
type drawing struct {
	file        string
	legs, count int
	options     generate.Options
}

// drawing reads the options of drawing points. legs is 0 where it is not given.
func (in *intake) drawing() drawing {
	d := drawing{
		file:  in.text("points"),
		legs:  in.whole("legs", 0, kinematics.MinLegs, kinematics.MaxLegs),
		count: in.whole("count", 1, 1, maxCount),
		options: generate.Options{
			Kind:          in.choice("kind", "", generate.Kinds),
			Dimension:     in.whole("dimension", 0, kinematics.MinDimension, kinematics.MaxDimension),
			Metric:        in.text("metric"),
			Polarisations: in.on("polarisations"),
			MassesSquared: in.number("masses-squared"),
			Seed:          in.seed(),
		},
	}
	if in.given("points") {
		for _, name := range []string{"count", "kind", "dimension", "metric", "polarisations", "masses-squared"} {
			if in.given(name) {
				in.fail("option", "leave one of them out", "--%s says how to draw points, but --points gives them", name)
			}
		}
	}
	return d
}

// resolve returns the points of a drawing: those of its file, or drawn ones.
// legs is the number read off the formula and exact tells whether the points
// must have just as many; 0 means that the formula does not tell.
func (in *intake) resolve(ctx context.Context, d drawing, legs int, exact bool) ([]*kinematics.Point, error) {
	var points []*kinematics.Point
	if in.given("points") {
		points = in.points(d.file)
		for _, p := range points {
			switch {
			case p.IsFamily():
				in.fail("family", "evaluation needs points with numbers only", "point %s is a family: it depends on a parameter", p.Label)
			case d.legs > 0 && p.Legs() != d.legs:
				in.fail("legs", "", "point %s has %d legs, --legs says %d", p.Label, p.Legs(), d.legs)
			case exact && p.Legs() != legs:
				in.fail("legs", "give points with as many legs as the amplitudes name", "the formula has %d legs, point %s has %d", legs, p.Label, p.Legs())
			case p.Legs() < legs:
				in.fail("legs", "", "the formula names leg %d, point %s has %d legs", legs, p.Label, p.Legs())
			}
		}
		return points, in.err()
	}
	switch {
	case d.legs == 0 && legs == 0:
		in.fail("legs", "give --legs N, or --points FILE", "the number of legs is not known")
	case exact && d.legs > 0 && d.legs != legs:
		in.fail("legs", "leave --legs out", "the formula has %d legs, --legs says %d", legs, d.legs)
	case d.legs > 0 && d.legs < legs:
		in.fail("legs", "", "the formula names leg %d, --legs says %d", legs, d.legs)
	case d.legs == 0:
		d.legs = max(legs, kinematics.MinLegs)
	}
	if err := in.err(); err != nil {
		return nil, err
	}
	return draw(ctx, d)
}

// draw draws points.
func draw(ctx context.Context, d drawing) ([]*kinematics.Point, error) {
	points, err := generate.ComputePoints(ctx, d.legs, d.count, d.options)
	var exhausted *generate.ExhaustedError
	if errors.As(err, &exhausted) {
		return nil, diag.List{{Code: "option", Message: fmt.Sprint(exhausted)}}
	}
	return points, err
}
