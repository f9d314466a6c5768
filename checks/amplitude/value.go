package amplitude

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"math/bits"
	"slices"

	"eliminant/rational/kinematics"
	"eliminant/rational/lift"
	"eliminant/rational/prime"
	"eliminant/rational/scattering"
	"eliminant/resultant"
)

// Options of ComputeValue; the zero value works.
type Options struct {
	Workers  int                   // primes evaluated at the same time, 0 means 1; never changes the result
	Progress func(done, total int) // primes done and needed
	Gauge    []int                 // elimination only: which place of the first ordering plays which role (resultant.NewPencil); nil tries several
}

// Value is one amplitude at one point, with its proof.
type Value struct {
	Value  *big.Rat
	Route  Route
	Proof  lift.Proof
	Record *lift.Record // the primes used
}

// PoleError says that an amplitude is infinite at a point.
type PoleError struct {
	Request   Request
	Invariant string // s12, or s12-msq with masses
}

func (e *PoleError) Error() string {
	return fmt.Sprintf("%s has a pole at this point: %s = 0", e.Request, e.Invariant)
}

// DegenerateError says that a route cannot work at a point: solutions of the
// scattering equations coincide or escape, or no variable separates them.
type DegenerateError struct {
	Route     Route
	Invariant string // the vanishing invariant; empty if none vanishes
	Reason    string
}

func (e *DegenerateError) Error() string {
	if e.Invariant == "" {
		return fmt.Sprintf("%s: %s", e.Route, e.Reason)
	}
	return fmt.Sprintf("%s: %s = 0, %s", e.Route, e.Invariant, e.Reason)
}

// MassError says that a point's masses do not fit the theory.
type MassError struct{ Request Request }

func (e *MassError) Error() string {
	return e.Request.String() + " needs one mass common to all legs: propagators are 1/(P^2 - m^2)"
}

// integers is a point scaled to integers: s_ab and m^2 times scale.
type integers struct {
	n      int
	scale  *big.Int
	s      [][]*big.Int
	mass   *big.Int // nil if massless
	scaled *kinematics.Invariants
}

func newIntegers(r Request, v *kinematics.Invariants) (*integers, error) {
	n := v.Legs()
	if err := checkLegs(r, n); err != nil {
		return nil, err
	}
	scale, flat, masses := v.Scaled()
	p := &integers{n: n, scale: scale, s: make([][]*big.Int, n)}
	s := make([][]*big.Rat, n)
	for a := range n {
		p.s[a] = flat[a*n : (a+1)*n]
		for _, x := range p.s[a] {
			s[a] = append(s[a], new(big.Rat).SetInt(x))
		}
	}
	var m []*big.Rat
	if !v.Massless() {
		if _, ok := v.CommonMassSquared(); !ok {
			return nil, &MassError{r}
		}
		p.mass = masses[0]
		for _, x := range masses {
			m = append(m, new(big.Rat).SetInt(x))
		}
	}
	var err error
	p.scaled, err = kinematics.NewInvariants(s, m)
	return p, err
}

// propagator returns the integer scale*(P^2 - m^2) of a mask of legs.
func (p *integers) propagator(mask uint32) *big.Int {
	z := new(big.Int)
	k := int64(bits.OnesCount32(mask))
	for a := mask; a != 0; a &= a - 1 {
		i := bits.TrailingZeros32(a)
		for b := a & (a - 1); b != 0; b &= b - 1 {
			z.Add(z, p.s[i][bits.TrailingZeros32(b)])
		}
	}
	if p.mass != nil {
		var m big.Int
		z.Sub(z, m.Mul(p.mass, m.SetInt64((k-2)*k+1)))
	}
	return z
}

// name writes the pole of a mask as formulas do.
func (p *integers) name(mask uint32) string {
	full := uint32(1)<<p.n - 1
	if bits.OnesCount32(mask) > p.n/2 {
		mask = full &^ mask
	}
	s := scattering.Channel(mask).String()
	if p.mass != nil {
		s += "-msq"
	}
	return s
}

// poleMasks lists the propagators an amplitude may have, as masks of legs, in
// the order that absoluteSum expects.
func poleMasks(r Request) []uint32 {
	if r.Braces {
		return newSubsetPlan(r.Legs()).poles()
	}
	plan := newWordPlan(r.Orderings[0], r.Orderings[len(r.Orderings)-1])
	out := make([]uint32, len(plan.poles))
	for i, legs := range plan.poles {
		for _, l := range legs {
			out[i] |= 1 << (r.Orderings[0][l] - 1)
		}
	}
	return out
}

// absoluteSum bounds the sum over diagrams of prod 1/|pole| from above.
func absoluteSum(r Request, poles []*big.Float) *big.Float {
	if r.Braces {
		return newSubsetPlan(r.Legs()).absolute(poles)
	}
	return newWordPlan(r.Orderings[0], r.Orderings[len(r.Orderings)-1]).absolute(poles)
}

// ComputeValue returns the exact value of an amplitude at a point by one route.
//
// The point is scaled to integers. Every cubic diagram divides by each of its
// propagators once, so the amplitude times D, the product of all its
// propagators, is an integer, and it is at most B, |D| times the sum over the
// diagrams of prod 1/|propagator|. The kernel is evaluated modulo table primes
// until their product exceeds 2B, which proves the value (proof "bound").
//
// Errors: *RequestError, *MassError, *PoleError (the amplitude is infinite
// here), *DegenerateError (this route cannot work here), a cancelled context.
func ComputeValue(ctx context.Context, r Request, v *kinematics.Invariants, route Route, o Options) (*Value, error) {
	kernel, err := NewKernel(r, route)
	if err != nil {
		return nil, err
	}
	if o.Gauge != nil && route == Elimination {
		kernel = func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
			return ResidueInGauge(ctx, r, p, o.Gauge)
		}
	}
	p, err := newIntegers(r, v)
	if err != nil {
		return nil, err
	}
	denominator := big.NewInt(1)
	masks := poleMasks(r)
	lower := make([]*big.Float, len(masks))
	for i, m := range masks {
		s := p.propagator(m)
		if s.Sign() == 0 {
			return nil, &PoleError{r, p.name(m)}
		}
		denominator.Mul(denominator, s)
		f := new(big.Float).SetPrec(64).SetMode(big.ToZero).SetInt(s)
		lower[i] = f.Abs(f)
	}
	if route == Elimination || route == Groebner {
		if err := checkRegular(r, v, route); err != nil {
			return nil, err
		}
	}
	bound := newUpper().SetInt(new(big.Int).Abs(denominator))
	bound.Mul(bound, absoluteSum(r, lower))
	limit, _ := bound.Int(nil)
	limit.Add(limit, big.NewInt(1))

	modular := func(ctx context.Context, f *prime.Field, out []prime.Element) error {
		point, err := p.scaled.Reduce(f)
		if err != nil {
			return err
		}
		x, err := kernel(ctx, point)
		out[0] = f.Mul(x, f.FromInt(denominator))
		return err
	}
	number, record, err := lift.Integers(ctx, 1, limit, modular, lift.Options{Workers: o.Workers, Progress: o.Progress})
	if err != nil {
		var separate *resultant.NotSeparatingError
		if errors.As(err, &separate) {
			return nil, &DegenerateError{Route: route, Reason: "no variable tried takes different values on all solutions"}
		}
		var never *lift.KernelError
		if errors.As(err, &never) {
			return nil, &DegenerateError{Route: route, Reason: never.Last.Error()}
		}
		return nil, err
	}
	value := new(big.Rat).SetFrac(number[0], denominator)
	power := new(big.Int).Exp(p.scale, big.NewInt(int64(p.n-3)), nil)
	value.Mul(value, new(big.Rat).SetInt(power))
	return &Value{Value: value, Route: route, Proof: record.Proof, Record: record}, nil
}

// checkRegular refuses points at which some invariant of the scattering
// equations vanishes: then, and only then, solutions coincide or escape.
func checkRegular(r Request, v *kinematics.Invariants, route Route) error {
	refuse := func(d *scattering.Data, err error) error {
		if err != nil {
			return err
		}
		if c := d.Vanishing(); len(c) > 0 {
			return &DegenerateError{Route: route, Invariant: c[0].String(),
				Reason: "solutions of the scattering equations coincide or escape"}
		}
		return nil
	}
	if v.Massless() {
		return refuse(scattering.FromInvariants(v))
	}
	if !r.Braces {
		return refuse(scattering.Shifted(v, r.Orderings[0]))
	}
	rest := slices.Clone(r.Orderings[0][1:])
	var failed error
	permute(rest, func(w []int) bool {
		failed = refuse(scattering.Shifted(v, append([]int{r.Orderings[0][0]}, w...)))
		return failed == nil
	})
	return failed
}
