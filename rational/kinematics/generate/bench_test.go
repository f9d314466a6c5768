package generate_test

import (
	"context"
	"fmt"
	"testing"

	"eliminant/rational/kinematics/generate"
)

func BenchmarkComputePoints(b *testing.B) {
	for _, kind := range generate.Kinds {
		for _, n := range []int{6, 9, 12} {
			b.Run(fmt.Sprintf("%s/%d", kind, n), func(b *testing.B) {
				seed := 0
				for b.Loop() {
					seed++
					_, err := generate.ComputePoints(context.Background(), n, 1, generate.Options{Kind: kind, Seed: fmt.Sprint(seed)})
					if err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
