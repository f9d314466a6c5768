package kinematics_test

import (
	"fmt"
	"math/big"
	"os"
	"strings"

	"eliminant/rational/kinematics"
	"eliminant/rational/prime"
)

const fourLegs = `{"format": "eliminant/points/1", "points": [
  {"label": "K4", "spinors": {
    "angle":  [[1, 0], [0, 1], [1, 1], [1, 3]],
    "square": [[1, 2], [3, -1], [0, "-7/2"], [-1, "3/2"]]}}
]}`

func ExampleReadPoints() {
	points, err := kinematics.ReadPoints(strings.NewReader(fourLegs), "four.json")
	if err != nil {
		fmt.Println(err)
		return
	}
	v, err := points[0].Invariants()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(points[0].Label, v.S(1, 2).RatString(), v.S(2, 3).RatString(), v.S(1, 3).RatString())
	// Output: K4 -7 21/2 -7/2
}

func ExampleReadPoints_errors() {
	text := `{"format": "eliminant/points/1", "points": [
  {"momenta": [[3, 1, 2, 2], [3, -1, -2, -2],
               [-3, 2, 1, 2], [-3, -2, -1, -1]]}
]}`
	_, err := kinematics.ReadPoints(strings.NewReader(text), "four.json")
	fmt.Println(err)
	// Output:
	// four.json:2:15: point p1: momentum is not conserved: component 4 sums to 1 (all legs are outgoing: incoming ones have negative energy)
	// four.json:3:31: point p1: leg 4 is off shell: k^2 - m^2 = 3 - 0 = 3 (massive legs need "masses_squared")
}

func ExamplePoint_Convert() {
	points, err := kinematics.ReadPoints(strings.NewReader(fourLegs), "four.json")
	if err != nil {
		fmt.Println(err)
		return
	}
	p, err := points[0].Convert(kinematics.KindMomenta)
	if err != nil {
		fmt.Println(err)
		return
	}
	if err := kinematics.WritePoints(os.Stdout, []*kinematics.Point{p}); err != nil {
		fmt.Println(err)
	}
	// Output:
	// {
	//   "format": "eliminant/points/1",
	//   "points": [
	//     {
	//       "label": "K4",
	//       "momenta": [
	//         ["1/2", 1, -1, "1/2"],
	//         ["-1/2", "3/2", "3/2", "1/2"],
	//         ["-7/4", "-7/4", "7/4", "7/4"],
	//         ["7/4", "-3/4", "-9/4", "-11/4"]
	//       ],
	//       "metric": "+-+-"
	//     }
	//   ]
	// }
}

func ExampleInvariants_Reduce() {
	s := make([][]*big.Rat, 4)
	for a, row := range [][]int64{{0, 2, -5, 3}, {2, 0, 3, -5}, {-5, 3, 0, 2}, {3, -5, 2, 0}} {
		for _, x := range row {
			s[a] = append(s[a], big.NewRat(x, 1))
		}
	}
	v, err := kinematics.NewInvariants(s, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	f, err := prime.NewField(101)
	if err != nil {
		fmt.Println(err)
		return
	}
	r, err := v.Reduce(f)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(f.Uint64(r.At(1, 3)), f.Uint64(r.Lorentz([]int{2, 3, 4})))
	// Output: 96 0
}
