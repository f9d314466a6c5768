package resultant

import (
	"fmt"

	"eliminant/rational/scattering"
)

// DegenerateError says that a vanishing invariant lets solutions escape to
// infinity, so that the algebra of the constraints has fewer than (n-3)!
// dimensions and the pencil cannot represent it.
type DegenerateError struct {
	Channel scattering.Channel // canonical
	Reason  string
}

func (e *DegenerateError) Error() string {
	return fmt.Sprintf("%s = 0: %s", e.Channel, e.Reason)
}

// NotSeparatingError says that the hidden variable t does not generate the algebra
// of the constraints: it takes equal values on different solutions (a symmetry of
// the data), or does not see a multiple one. Another hidden leg may do.
type NotSeparatingError struct {
	Leg    int // the hidden leg
	Degree int // of the least recurrence of the sums of t^i/J_h, below Size
	Size   int // (n-3)!
}

func (e *NotSeparatingError) Error() string {
	return fmt.Sprintf("z%d does not separate the %d solutions: its residues have a recurrence of degree %d", e.Leg, e.Size, e.Degree)
}

// RangeError says that a computation was asked for more legs than it is meant for.
type RangeError struct {
	What          string
	Legs, Maximum int
}

func (e *RangeError) Error() string {
	return fmt.Sprintf("%s for %d legs: the range is 4 to %d", e.What, e.Legs, e.Maximum)
}

// RoleError says why a list of legs does not assign the roles.
type RoleError struct{ Reason string }

func (e *RoleError) Error() string { return "roles of the legs: " + e.Reason }
