package series_test

import (
	"context"
	"fmt"

	"eliminant/checks/amplitude/series"
	"eliminant/rational/prime"
)

// All planar invariants of five legs equal to 1: each of the five planar diagrams
// is 1, and m(12345|12345) is + their sum.
func ExampleComputeSum() {
	f := prime.TableField(0)
	var s []prime.Element
	for a := range 5 {
		for b := range 5 {
			s = append(s, f.FromInt64([]int64{0, 1, -1, -1, 1}[(b-a+5)%5]))
		}
	}
	order := []int{1, 2, 3, 4, 5}
	problem, err := series.BiAdjoint(order, order)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, pole := range problem.Poles {
		fmt.Print(pole.Channel, " ")
	}
	value, err := series.ComputeSum(context.Background(), f, s, problem, series.Options{Workers: 2})
	fmt.Println("degree", problem.NumeratorDegree, "value", f.Uint64(value), err)
	// Output: s12 s23 s34 s15 s45 degree 3 value 5 <nil>
}
