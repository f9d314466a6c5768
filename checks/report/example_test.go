package report_test

import (
	"fmt"
	"math/big"
	"os"

	"eliminant/checks/report"
)

func ExampleDecimal() {
	fmt.Println(report.Decimal(big.NewRat(355, 113), 8))
	// Output: 3.1415929
}

func ExampleResidues() {
	r := &report.Residues{Integrand: "1/J", Values: []report.Residue{{Point: "p1", Value: new(big.Rat), Proof: "bound", Primes: 1}}}
	r.WriteJSON(os.Stdout)
	// Output:
	// {
	//   "format": "eliminant/residues/1",
	//   "integrand": "1/J",
	//   "values": [
	//     {
	//       "point": "p1",
	//       "value": "0",
	//       "proof": "bound",
	//       "reason": ""
	//     }
	//   ]
	// }
}
