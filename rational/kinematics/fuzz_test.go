package kinematics_test

import (
	"bytes"
	"testing"

	"github.com/stretchr/testify/require"

	"eliminant/rational/kinematics"
)

// Whatever the input: no panic, an error that lists something, or valid points
// that are read back as they were written.
func FuzzReadPoints(f *testing.F) {
	for _, c := range broken {
		f.Add([]byte(c.text))
	}
	for _, c := range splitPoints {
		var b bytes.Buffer
		require.NoError(f, kinematics.WritePoints(&b, []*kinematics.Point{c.point}))
		f.Add(b.Bytes())
	}
	f.Add([]byte(in(`{"momenta": [[2,1,0],["2",-1,0],[-2,0,"1/1"],[-2,0,-1]], "metric": "+--", "masses_squared": [3,3,3,3], "polarisations": [null,[0,0,1],null,null]}`)))
	f.Add([]byte(in(`{"products": {"k.k": [[0,1,-3,2],[1,0,2,-3],[-3,2,0,1],[2,-3,1,0]], "e.k": [[0,1,-1,0],[1,0,-1,0],null,null], "e.e": [[7,1,null,0],[1,0,0,null],null,null]}}`)))
	f.Add([]byte(in(`{"spinors": {"angle": [[[1,1],0],[0,1],[1,1],[1,3]], "square": [[1,2],[3,-1],[0,"-7/2"],[-1,"3/2"]]}}`)))
	f.Fuzz(func(t *testing.T, text []byte) {
		points, err := kinematics.ReadPoints(bytes.NewReader(text), "fuzz")
		if err != nil {
			var list kinematics.InputErrors
			require.ErrorAs(t, err, &list)
			require.NotEmpty(t, list)
			require.NotEmpty(t, err.Error())
			require.Empty(t, points)
			return
		}
		require.NotEmpty(t, points)
		requireRoundTrip(t, points)
		for _, p := range points {
			require.NoError(t, p.Validate())
			if v, err := p.Invariants(); err == nil {
				require.Equal(t, p.Legs(), v.Legs())
			} else {
				require.True(t, p.IsFamily())
			}
		}
	})
}
