package kinematics_test

import (
	"bytes"
	"context"
	"strconv"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
	"eliminant/rational/prime"
)

func benchPoint(b *testing.B, kind string, legs int) *kinematics.Point {
	points, err := generate.ComputePoints(context.Background(), legs, 1, generate.Options{Kind: kind, Seed: "benchmark"})
	require.NoError(b, err)
	return points[0]
}

func BenchmarkReduce(b *testing.B) {
	for _, n := range []int{8, 12} {
		b.Run(strconv.Itoa(n), func(b *testing.B) {
			v, err := benchPoint(b, generate.Twistors, n).Invariants()
			require.NoError(b, err)
			f := prime.TableField(0)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := v.Reduce(f); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkInvariants(b *testing.B) {
	for _, kind := range []string{generate.Twistors, generate.Physical, generate.Invariants} {
		b.Run(kind, func(b *testing.B) {
			p := benchPoint(b, kind, 8)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := p.Invariants(); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkReadPoints(b *testing.B) {
	var text bytes.Buffer
	require.NoError(b, kinematics.WritePoints(&text, []*kinematics.Point{benchPoint(b, generate.Physical, 8)}))
	b.SetBytes(int64(text.Len()))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := kinematics.ReadPoints(bytes.NewReader(text.Bytes()), ""); err != nil {
			b.Fatal(err)
		}
	}
}
