package notation_test

import (
	"fmt"

	"meniscus.example/client/notation"
)

func ExampleParseRefraction() {
	r, err := notation.ParseRefraction("-4.25 -1.50 @ 175, vertex 12, add +2.00")
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(r.GetSphereD(), r.GetCylinderD(), r.GetAxisDeg(), r.GetVertexDistanceMm(), r.GetAddD())
	fmt.Println(notation.FormatRefraction(r, 2))
	// Output:
	// -4.25 -1.5 175 12 2
	// -4.25 / -1.50 x 175, vertex 12 mm, add +2.00
}

// An error names the field, the place and what was expected there.
func ExampleParseRefraction_error() {
	_, err := notation.ParseRefraction("-4.25 / -1.50 by 175")
	fmt.Println(err)
	// Output:
	// refraction.axis_deg: "by 175" at character 15 of "-4.25 / -1.50 by 175"; expected the axis after an x, such as x 175
}

// Written without a sign, a power is plus; and here it is hardly meant.
func ExampleUnsignedPowers() {
	fmt.Println(notation.UnsignedPowers("-4.25 / 1.50 x 175"))
	// Output:
	// [cylinder]
}

// The steep reading was written first. Only the meridian that was written is in the message.
func ExampleParseKeratometry() {
	k, err := notation.ParseKeratometry("44.50 @ 90 / 43.25")
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(k.GetFlat().GetPowerD(), k.GetFlat().HasMeridianDeg(), k.GetSteep().GetPowerD(), k.GetSteep().GetMeridianDeg())
	fmt.Println(notation.FormatKeratometry(k, 2))
	// Output:
	// 43.25 false 44.5 90
	// 43.25 D / 44.50 D @ 90
}

func ExampleFormatPower() {
	p, err := notation.ParseSphereCylinder("-3.9964 / -0.2912 x 153.6125")
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(notation.FormatPower(p, 2))
	fmt.Println(notation.FormatPower(p, 3))
	fmt.Println(notation.FormatPower(p, notation.Exact))
	// Output:
	// -4.00 / -0.29 x 153.6
	// -3.996 / -0.291 x 153.6
	// -3.9964 / -0.2912 x 153.6125
}
