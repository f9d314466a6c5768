package generate_test

import (
	"context"
	"fmt"
	"os"

	"eliminant/rational/kinematics"
	"eliminant/rational/kinematics/generate"
)

func ExampleComputePoints() {
	points, err := generate.ComputePoints(context.Background(), 5, 1, generate.Options{Kind: generate.Physical, Seed: "1"})
	if err != nil {
		fmt.Println(err)
		return
	}
	if err := kinematics.WritePoints(os.Stdout, points); err != nil {
		fmt.Println(err)
	}
	// Output:
	// {
	//   "format": "eliminant/points/1",
	//   "points": [
	//     {
	//       "label": "p1",
	//       "momenta": [
	//         [-3, 2, 1, 2],
	//         [-5, 0, -4, -3],
	//         [2, -2, 0, 0],
	//         [3, -2, 2, -1],
	//         [3, 2, 1, 2]
	//       ],
	//       "metric": "+---"
	//     }
	//   ]
	// }
}
