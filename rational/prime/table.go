package prime

import "sync"

// TableStep is what every prime of the table is 1 modulo: 2^20 315. So the
// table fields have roots of unity of every order dividing it: transforms to
// length 2^20 and the start nodes of the series route for all n to 10, 12, 13.
const TableStep = 1 << 20 * 315

var table struct {
	sync.Mutex
	fields []*Field
	next   uint64 // next candidate, going down
}

// TableField returns the field of the i-th prime of the fixed table, i >= 0:
// the primes = 1 mod TableStep below 2^62, in descending order. There are more
// than 10^8 of them above 2^61; they are found when first asked for and kept.
func TableField(i int) *Field {
	table.Lock()
	defer table.Unlock()
	if table.next == 0 {
		table.next = (1<<62-1)/TableStep*TableStep + 1
		if table.next >= 1<<62 {
			table.next -= TableStep
		}
	}
	for len(table.fields) <= i {
		if IsPrime(table.next) {
			table.fields = append(table.fields, newField(table.next))
		}
		table.next -= TableStep
	}
	return table.fields[i]
}
