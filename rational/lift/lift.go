// Package lift turns vectors modulo word-size primes into integers and rational
// numbers, with a proven number of primes.
//
// The one thing it asks of a computation is a Kernel, a function from a prime
// to a vector over GF(p). Integers and Rationals evaluate it modulo primes of
// the fixed table until their product exceeds what a bound on the result asks
// for (proof "bound"). "Agreement", stopping when further primes confirm a
// value, is no proof, and is reported as what it is.
package lift

import (
	"context"
	"errors"
	"fmt"
	"math/big"

	"eliminant/rational/prime"

	"golang.org/x/sync/errgroup"
)

// Proof says why a lifted value is right.
type Proof string

// The proofs. Bound: the primes' product exceeds twice a proven bound.
// Agreement: further primes agreed, which is strong evidence and no proof.
const (
	Bound     Proof = "bound"
	Agreement Proof = "agreement"
)

// Kernel computes a vector over GF(p). It may return an error wrapping
// prime.ErrBadPrime; that prime is passed over. It may be called concurrently.
type Kernel func(ctx context.Context, f *prime.Field, out []prime.Element) error

// Options of Integers and Rationals; the zero value works.
type Options struct {
	Workers     int                   // kernels run at the same time, 0 means 1; never changes the result
	MaxPrimes   int                   // most primes used, 0 means 2^20
	FirstPrime  int                   // first place in the table
	Progress    func(done, total int) // primes done and needed; called from one goroutine
	Proof       Proof                 // "" means Bound
	ExtraPrimes int                   // Agreement: further primes that must agree, 0 means 2
}

// Record says what a lifted value rests on.
type Record struct {
	Primes    []uint64 // used, in the order of the table
	Proof     Proof
	BadPrimes int // passed over
}

// BudgetError says that the primes allowed do not suffice. Nothing is known of
// the result then but its residues.
type BudgetError struct{ Needed, Allowed int }

func (e *BudgetError) Error() string {
	return fmt.Sprintf("the bound asks for %d primes, at most %d are allowed", e.Needed, e.Allowed)
}

// KernelError says that a kernel fails at every prime.
type KernelError struct{ Last error }

func (e *KernelError) Error() string { return "no prime works: " + e.Last.Error() }

func (e *KernelError) Unwrap() error { return e.Last }

// maxBad is how many primes in a row may be bad: bad primes divide fixed
// nonzero integers, so a longer run means that the computation is not defined.
const maxBad = 24

// run evaluates a kernel modulo table primes, Workers at a time, in order.
type run struct {
	kernel   Kernel
	length   int
	o        Options
	next     int // place in the table
	bad, row int // bad primes in all, and in a row
	record   *Record
	residues [][]prime.Element // by prime
	fields   []*prime.Field
}

func newRun(length int, k Kernel, o Options, p Proof) *run {
	if o.MaxPrimes == 0 {
		o.MaxPrimes = 1 << 20
	}
	if o.Workers < 1 {
		o.Workers = 1
	}
	return &run{kernel: k, length: length, o: o, next: o.FirstPrime, record: &Record{Proof: p}}
}

// extend evaluates until count primes are known.
func (r *run) extend(ctx context.Context, count, total int) error {
	if count > r.o.MaxPrimes {
		return &BudgetError{count, r.o.MaxPrimes}
	}
	for len(r.fields) < count {
		batch := min(count-len(r.fields), max(8*r.o.Workers, 1))
		if r.o.Workers == 1 {
			batch = 1
		}
		out := make([][]prime.Element, batch)
		errs := make([]error, batch)
		g, inner := errgroup.WithContext(ctx)
		g.SetLimit(r.o.Workers)
		for i := range batch {
			f := prime.TableField(r.next + i)
			g.Go(func() error {
				if inner.Err() != nil {
					return context.Cause(inner)
				}
				out[i] = make([]prime.Element, r.length)
				errs[i] = r.kernel(inner, f, out[i])
				if errs[i] != nil && !errors.Is(errs[i], prime.ErrBadPrime) {
					return errs[i]
				}
				return nil
			})
		}
		if err := g.Wait(); err != nil {
			return r.first(ctx, errs, err)
		}
		for i := range batch {
			f := prime.TableField(r.next + i)
			if errs[i] != nil {
				r.row++
				r.record.BadPrimes++
				if r.row >= maxBad {
					return &KernelError{errs[i]}
				}
				continue
			}
			r.row = 0
			r.fields = append(r.fields, f)
			r.residues = append(r.residues, out[i])
			r.record.Primes = append(r.record.Primes, f.Modulus())
		}
		r.next += batch
		if r.o.Progress != nil {
			r.o.Progress(len(r.fields), max(total, count))
		}
		if ctx.Err() != nil {
			return context.Cause(ctx)
		}
	}
	return nil
}

// first returns the error of the earliest prime, so that it does not depend on
// the number of workers.
func (r *run) first(ctx context.Context, errs []error, err error) error {
	if ctx.Err() != nil {
		return fmt.Errorf("lifting stopped after %d primes: %w", len(r.fields), context.Cause(ctx))
	}
	for _, e := range errs {
		if e != nil && !errors.Is(e, prime.ErrBadPrime) && !errors.Is(e, context.Canceled) {
			return e
		}
	}
	return err
}

// needed is how many further primes make the product exceed bound; table
// primes exceed 2^61.
func needed(bound *big.Int) int { return bound.BitLen()/61 + 1 }

// combine lifts every entry to the symmetric range.
func (r *run) combine() ([]*big.Int, *Tree) {
	t := NewTree(r.record.Primes)
	out := make([]*big.Int, r.length)
	residues := make([]uint64, len(r.fields))
	for j := range out {
		for i, f := range r.fields {
			residues[i] = f.Uint64(r.residues[i][j])
		}
		out[j] = t.Combine(new(big.Int), residues)
	}
	return out, t
}

// Integers recovers integers x_j with |x_j| <= bound from a kernel that gives
// them modulo primes. The product of the primes used exceeds 2 bound, which
// proves the result (if bound is a bound). Errors: *BudgetError, *KernelError, the
// kernel's own, a cancelled context with its cause.
func Integers(ctx context.Context, length int, bound *big.Int, k Kernel, o Options) ([]*big.Int, *Record, error) {
	if o.Proof == Agreement {
		return agreeIntegers(ctx, length, k, o)
	}
	r := newRun(length, k, o, Bound)
	n := needed(new(big.Int).Lsh(bound, 1))
	if err := r.extend(ctx, n, n); err != nil {
		return nil, r.record, err
	}
	x, _ := r.combine()
	for j := range x {
		if x[j].CmpAbs(bound) > 0 {
			return nil, r.record, &BoundError{j, bound}
		}
	}
	return x, r.record, nil
}

// BoundError says that a lifted entry exceeds the bound it was promised: the
// bound or the kernel is wrong.
type BoundError struct {
	Entry int
	Bound *big.Int
}

func (e *BoundError) Error() string {
	return fmt.Sprintf("entry %d exceeds its bound of %d bits: the bound or the kernel is wrong", e.Entry, e.Bound.BitLen())
}

// Rationals recovers fractions with |numerator| <= numBound and 0 < denominator
// <= denBound; the product of the primes exceeds 2 numBound denBound. With Proof
// Agreement the bounds are not used and may be nil.
func Rationals(ctx context.Context, length int, numBound, denBound *big.Int, k Kernel, o Options) ([]*big.Rat, *Record, error) {
	if o.Proof == Agreement {
		return agreeRationals(ctx, length, k, o)
	}
	r := newRun(length, k, o, Bound)
	n := needed(new(big.Int).Lsh(mul(numBound, denBound), 1))
	if err := r.extend(ctx, n, n); err != nil {
		return nil, r.record, err
	}
	x, t := r.combine()
	out := make([]*big.Rat, length)
	for j := range x {
		v, ok := Reconstruct(x[j], t.Product(), numBound, denBound)
		if !ok {
			return nil, r.record, &BoundError{j, numBound}
		}
		out[j] = v
	}
	return out, r.record, nil
}

// agreeIntegers adds primes until the lifted integers stay the same for
// ExtraPrimes further primes.
func agreeIntegers(ctx context.Context, length int, k Kernel, o Options) ([]*big.Int, *Record, error) {
	extra := extraPrimes(o)
	r := newRun(length, k, o, Agreement)
	for count := 1; ; count += max(1, count/4) {
		if err := r.extend(ctx, count+extra, 0); err != nil {
			return nil, r.record, err
		}
		head := r.head(len(r.fields) - extra)
		x, _ := head.combine()
		if r.confirm(len(head.fields), func(f *prime.Field, j int) (prime.Element, bool) { return f.FromInt(x[j]), true }) {
			return x, r.record, nil
		}
	}
}

// agreeRationals is agreeIntegers for fractions within Wang's bounds.
func agreeRationals(ctx context.Context, length int, k Kernel, o Options) ([]*big.Rat, *Record, error) {
	extra := extraPrimes(o)
	r := newRun(length, k, o, Agreement)
	for count := 1; ; count += max(1, count/4) {
		if err := r.extend(ctx, count+extra, 0); err != nil {
			return nil, r.record, err
		}
		head := r.head(len(r.fields) - extra)
		x, t := head.combine()
		half := new(big.Int).Rsh(t.Product(), 1)
		half.Sqrt(half)
		out := make([]*big.Rat, length)
		ok := true
		for j := range x {
			if out[j], ok = Reconstruct(x[j], t.Product(), half, half); !ok {
				break
			}
		}
		if ok && r.confirm(len(head.fields), func(f *prime.Field, j int) (prime.Element, bool) { return f.FromRat(out[j]) }) {
			return out, r.record, nil
		}
	}
}

func extraPrimes(o Options) int {
	if o.ExtraPrimes > 0 {
		return o.ExtraPrimes
	}
	return 2
}

// head is the run of the first n primes.
func (r *run) head(n int) *run {
	return &run{length: r.length, fields: r.fields[:n], residues: r.residues[:n], record: &Record{Primes: r.record.Primes[:n]}}
}

// confirm compares a candidate with the residues from prime n on.
func (r *run) confirm(n int, at func(f *prime.Field, j int) (prime.Element, bool)) bool {
	for i := n; i < len(r.fields); i++ {
		for j := range r.length {
			if v, ok := at(r.fields[i], j); !ok || v != r.residues[i][j] {
				return false
			}
		}
	}
	return true
}
