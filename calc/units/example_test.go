package units_test

import (
	"fmt"

	"borewright/calc/units"
)

func ExampleParse() {
	q, err := units.Parse("120 m3/h", units.VolumeFlow)
	fmt.Printf("%.6f m3/s %v\n", q.Value, err)
	_, err = units.Parse("5 bar", units.StatePressure)
	fmt.Println(err)
	// Output:
	// 0.033333 m3/s <nil>
	// 5 bar: absolute or gauge? say bara or barg; for example 4.2 barg
}

func ExampleParseIn() {
	mm, _ := units.ParseUnit("mm")
	q, err := units.ParseIn("150", mm, units.Length)
	fmt.Println(q.Value, err)
	// Output: 0.15 <nil>
}

func ExampleParseUnit() {
	u, err := units.ParseUnit("lb/ft/s")
	fmt.Println(u, u.ASCII(), u.Kind(), err)
	// Output: lb/(ft.s) lb_per_ft_s dynamic_viscosity <nil>
}

func ExampleUnit_ToSI() {
	u, _ := units.ParseUnit("degF")
	v, err := u.ToSI(77)
	fmt.Println(v, err)
	// Output: 298.15 <nil>
}

func ExampleUnit_FromSI() {
	v, err := units.Plant.Unit(units.VolumeFlow).FromSI(0.01)
	fmt.Println(v, err)
	// Output: 36 <nil>
}

func ExampleConvert() {
	c, err := units.Convert("100 gpm", "m3/h")
	fmt.Printf("%.4f %s %s %v\n", c.Value, c.Unit, c.Kind, err)
	// Output: 22.7125 m3/h volume_flow <nil>
}

func ExampleConvertAt() {
	c, err := units.ConvertAt("4 barg", "kPaa", 95000)
	fmt.Println(c.Value, c.Unit, err)
	// Output: 495 kPaa <nil>
}

func ExamplePressureAtAltitude() {
	p, err := units.PressureAtAltitude(1000)
	fmt.Printf("%.0f Pa %v\n", p, err)
	// Output: 89876 Pa <nil>
}
