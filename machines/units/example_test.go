package units_test

import (
	"fmt"

	"barlitre/machines/units"
)

func ExampleParse() {
	p, u, err := units.Parse("2300 psi", units.Pressure)
	fmt.Printf("%.0f Pa, %s, %v\n", p, u.Symbol, err)
	_, _, err = units.Parse("160 bsr", units.Pressure)
	fmt.Println(err)
	// Output:
	// 15857942 Pa, psi, <nil>
	// unit "bsr" is not a unit of pressure; use bar, Pa, kPa, MPa or psi
}
