package amplitude

import (
	"context"
	"errors"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

func groebnerKernel(r Request) Kernel {
	return func(ctx context.Context, p *kinematics.Reduced) (prime.Element, error) {
		return 0, errors.New("not here")
	}
}
