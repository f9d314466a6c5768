// Package generate draws exact kinematic points of every kind from a seed:
// twistors, spinors, momenta in any dimension and signature, physical integer
// momenta, invariants and dot products, massless or with a common mass. Numbers
// are kept small, and no channel invariant vanishes.
package generate

import (
	"context"
	"fmt"
	"math/big"
	"slices"
	"strconv"
	"strings"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

// The kinds of points that can be drawn: those of kinematics, and Physical, real
// Minkowski momenta.
const (
	Twistors   = "twistors"
	Spinors    = "spinors"
	Momenta    = "momenta"
	Physical   = "physical"
	Invariants = "invariants"
	Products   = "products"
)

// Kinds lists the kinds of points that can be drawn.
var Kinds = []string{Twistors, Spinors, Momenta, Physical, Invariants, Products}

// Options say what to draw. The zero value draws spinors.
type Options struct {
	// Kind is one of Kinds. Empty means Spinors, or Momenta if a dimension other
	// than 4, a metric, polarisations or a mass is asked for.
	Kind string

	// Dimension of momenta and physical points; 0 means that of the metric, or 4.
	Dimension int

	// Metric of momenta, a string of signs; empty means mostly minus.
	Metric string

	// Polarisations adds vectors e with e.k = 0 to momenta and physical points,
	// and the products with e and with f to products. They do not change the
	// momenta.
	Polarisations bool

	// MassesSquared is the squared mass of all legs, nil for massless.
	MassesSquared *big.Rat

	// Seed is any text. Equal seeds give equal points.
	Seed string

	// Size is the bound on the random integers to begin with, 0 for a choice by
	// the number of legs. It grows if too many draws are degenerate.
	Size int
}

// ExhaustedError says that no acceptable point was found within the limit: there
// may be none (physical points of some masses in 3 dimensions).
type ExhaustedError struct {
	Kind     string
	Legs     int
	Attempts int
}

func (e *ExhaustedError) Error() string {
	return fmt.Sprintf("no %s point of %d legs without a vanishing invariant in %d draws; try another seed, squared mass or dimension", e.Kind, e.Legs, e.Attempts)
}

// maxAttempts bounds the draws for one point.
const maxAttempts = 1500

// ComputePoints returns count points of n legs, labelled p1, p2, ... Point i
// depends on kind, legs, seed, i and the options, not on count. Every point is
// valid, and no channel invariant (k_I)^2, 2 <= |I| <= n-2, vanishes; with
// masses, neither does any (k_I)^2 - m^2 nor any sum over the pairs in I of the
// matrix 2 k_a.k_b + m^2 [a, b cyclic neighbours]. Beyond 16 legs this holds for
// pairs and consecutive legs.
//
// The error is of type kinematics.InputErrors for options that contradict each
// other or the number of legs, *ExhaustedError if the search ends without a
// point, or wraps the cause of the cancellation of ctx. Cost: milliseconds a
// point up to 12 legs, seconds at 64.
func ComputePoints(ctx context.Context, legs, count int, o Options) ([]*kinematics.Point, error) {
	d, err := newDrawer(legs, o)
	if err != nil {
		return nil, err
	}
	points := make([]*kinematics.Point, 0, max(count, 0))
	for i := range count {
		p, err := d.point(ctx, i+1)
		if err != nil {
			return nil, err
		}
		points = append(points, p)
	}
	return points, nil
}

// drawer draws points of one kind.
type drawer struct {
	Options
	n      int
	mass   *big.Rat // nil if massless
	draw   func(src *prime.Source, size int) *kinematics.Point
	shells *shells // of physical points
}

// refuse returns an error about the options.
func refuse(hint, format string, args ...any) error {
	return kinematics.InputErrors{{Code: kinematics.CodeOption, Message: fmt.Sprintf(format, args...), Hint: hint}}
}

func newDrawer(n int, o Options) (*drawer, error) {
	if n < kinematics.MinLegs || n > kinematics.MaxLegs {
		return nil, kinematics.InputErrors{{Code: kinematics.CodeLegs,
			Message: fmt.Sprintf("%d legs; from %d to %d are possible", n, kinematics.MinLegs, kinematics.MaxLegs)}}
	}
	d := &drawer{Options: o, n: n}
	if o.MassesSquared != nil && o.MassesSquared.Sign() != 0 {
		d.mass = o.MassesSquared
	}
	if d.Kind == "" {
		d.Kind = Spinors
		if d.Metric != "" || d.Dimension != 0 && d.Dimension != 4 || d.Polarisations || d.mass != nil {
			d.Kind = Momenta
		}
	}
	if err := d.checkOptions(); err != nil {
		return nil, err
	}
	switch d.Kind {
	case Twistors:
		d.draw = d.twistors
	case Spinors:
		d.draw = d.spinors
	case Momenta:
		d.draw = d.momenta
	case Physical:
		d.shells = newShells(min(3, d.Dimension-1))
		d.draw = d.physical
	case Invariants:
		d.draw = d.invariants
	case Products:
		d.draw = d.products
	}
	return d, nil
}

// checkOptions refuses options that do not fit the kind and fills in defaults.
func (d *drawer) checkOptions() error {
	if !slices.Contains(Kinds, d.Kind) {
		return refuse("kinds: "+strings.Join(Kinds, ", "), "unknown kind %q", d.Kind)
	}
	switch d.Kind {
	case Twistors, Spinors:
		if d.mass != nil {
			return refuse("draw momenta, physical, invariants or products", "%s are massless", d.Kind)
		}
		if d.Dimension != 0 && d.Dimension != 4 {
			return refuse("draw momenta or invariants", "%s exist in 4 dimensions only, not in %d", d.Kind, d.Dimension)
		}
	case Invariants, Products:
		if d.Dimension != 0 {
			return refuse("draw momenta", "%s belong to no dimension", d.Kind)
		}
	}
	vectors := d.Kind == Momenta || d.Kind == Physical
	if d.Metric != "" && !vectors {
		return refuse("draw momenta", "%s have no metric", d.Kind)
	}
	if d.Polarisations && !vectors && d.Kind != Products {
		return refuse("draw momenta, physical or products", "%s carry no polarisations", d.Kind)
	}
	if vectors {
		if err := d.checkMetric(); err != nil {
			return err
		}
	}
	if d.Kind == Physical {
		return d.checkPhysical()
	}
	return nil
}

func (d *drawer) checkMetric() error {
	if d.Dimension == 0 {
		d.Dimension = 4
		if d.Metric != "" {
			d.Dimension = len(d.Metric)
		}
	}
	if d.Dimension < kinematics.MinDimension || d.Dimension > kinematics.MaxDimension {
		return refuse("", "%d dimensions; from %d to %d are possible", d.Dimension, kinematics.MinDimension, kinematics.MaxDimension)
	}
	minus := "+" + strings.Repeat("-", d.Dimension-1)
	if d.Metric == "" {
		d.Metric = minus
	}
	if strings.Trim(d.Metric, "+-") != "" || len(d.Metric) != d.Dimension {
		return refuse(fmt.Sprintf("for instance %q", minus), "the metric %q is not a string of %d signs", d.Metric, d.Dimension)
	}
	if !strings.Contains(d.Metric, "+") || !strings.Contains(d.Metric, "-") {
		return refuse("use both signs", "the metric %q has no null vectors", d.Metric)
	}
	if d.Kind == Physical && d.Metric != minus {
		return refuse("leave the metric out, or draw momenta", "physical points are in the metric %q, not %q", minus, d.Metric)
	}
	return nil
}

// point draws until a point is acceptable.
func (d *drawer) point(ctx context.Context, index int) (*kinematics.Point, error) {
	key := []string{"", d.Kind, strconv.Itoa(d.n), d.Seed, strconv.Itoa(index)}
	key[0] = "kinematic point"
	src := prime.NewSource(key...)
	size := d.Size
	if size <= 0 {
		size = d.size()
	}
	for attempt := range maxAttempts {
		if ctx.Err() != nil {
			return nil, fmt.Errorf("drawing %s: %w", d.Kind, context.Cause(ctx))
		}
		p := d.draw(src, size+size*attempt/16)
		if p == nil {
			continue
		}
		v, err := p.Invariants()
		if err != nil {
			return nil, fmt.Errorf("a drawn point is not valid: %w", err)
		}
		if !regular(v) {
			continue
		}
		p.Label = "p" + strconv.Itoa(index)
		if d.Polarisations {
			key[0] = "polarisations"
			d.polarise(p, prime.NewSource(key...))
			if err := p.Validate(); err != nil {
				return nil, fmt.Errorf("a drawn point is not valid: %w", err)
			}
		}
		return p, nil
	}
	return nil, &ExhaustedError{d.Kind, d.n, maxAttempts}
}

// size returns the bound on random integers to begin with: there are 2^(n-1)
// channels, and each vanishes with a chance of about one over the size of the
// invariants, which are linear in invariants and quadratic or more in the rest.
func (d *drawer) size() int {
	switch d.Kind {
	case Invariants, Products:
		size := 9 << max(0, min(d.n, 20)-9)
		if d.mass != nil {
			size *= 4 // three conditions on each channel
		}
		return size
	case Twistors:
		return 3
	}
	return 2 + d.n/4
}
