package fitting

import (
	"meniscus.example/optics/surface"
	"meniscus.example/optics/unit"
	"meniscus.example/optics/vergence"
)

// Value is a number with the name that a formula gives it and a UCUM code.
type Value struct {
	Name   string
	Number float64
	Unit   string
}

// Step is one line of a derivation: the formula with the inputs put into it gives the result. The formula is arithmetic
// with + - * / and parentheses, sqrt(x), hypot(x, y), log10(x), and, with angles in degrees, sind(x), cosd(x),
// atan2d(y, x).
type Step struct {
	Name    string
	Formula string
	Inputs  []Value
	Result  Value
	Source  string
}

// The sources of the steps.
const (
	sourceVectors     = "Thibos, Wheeler & Horner, Optom Vis Sci 1997;74:367-375"
	sourceEffectivity = "Fc = F/(1 - xF) (Wikipedia, Vertex distance), as the inverse of a symmetric matrix"
	sourceSurfaces    = "surface power (n' - n)/r; in matrix form Long 1976, Keating 1980"
	sourceTears       = "tear lens as the difference of the curves; thick tears as Schornack et al. 2014"
	sourceStepAlong   = "vergence stepped along through a thick lens (Keating 2002, from memory), in matrix form"
	sourceAcuity      = "Blendowske, Optom Vis Sci 2015"
)

// Derivation is a calculation told step by step.
type Derivation struct{ steps []Step }

// Steps are the steps so far.
//
// Source: definition.
func (d *Derivation) Steps() []Step { return d.steps }

func dioptres(name string, x unit.Dioptre) Value { return Value{name, float64(x), ucumDioptre} }
func degrees(name string, x unit.Degree) Value   { return Value{name, float64(x), ucumDegree} }
func lengths(name string, x unit.Millimetre) Value {
	return Value{name, float64(x), ucumMillimetre}
}
func indices(name string, x unit.Index) Value { return Value{name, float64(x), ucumOne} }
func plain(name string, x float64) Value      { return Value{name, x, ucumOne} }

// step adds a step.
func (d *Derivation) step(name, formula, source string, result Value, inputs ...Value) {
	d.steps = append(d.steps, Step{Name: name, Formula: formula, Inputs: inputs, Result: result, Source: source})
}

// each adds three steps, one for each component of a vector, with a formula whose names end in the component's.
func (d *Derivation) each(name, formula, source, result string, v vergence.PowerVector, inputs func(component string) []Value) {
	for _, c := range []struct {
		component string
		value     unit.Dioptre
	}{{"M", v.M}, {"J0", v.J0}, {"J45", v.J45}} {
		d.step(name+", "+c.component, formula, source, dioptres(result+c.component, c.value), inputs(c.component)...)
	}
}

func component(v vergence.PowerVector, c string) unit.Dioptre {
	switch c {
	case "J0":
		return v.J0
	case "J45":
		return v.J45
	}
	return v.M
}

// Vector adds the steps from a power as written to its power vector v. The symbol begins the names of the results.
//
// Source: Thibos, Wheeler & Horner 1997.
func (d *Derivation) Vector(name, symbol string, p vergence.SphereCylinder, v vergence.PowerVector) {
	axis := p.Axis
	if axis == 0 {
		axis = 180 // without a cylinder any axis gives the same
	}
	s, c, a := dioptres("S", p.Sphere), dioptres("C", p.Cylinder), degrees("a", axis)
	d.step(name+", M", "S + C/2", sourceVectors, dioptres(symbol+"_M", v.M), s, c)
	d.step(name+", J0", "-(C/2)*cosd(2*a)", sourceVectors, dioptres(symbol+"_J0", v.J0), c, a)
	d.step(name+", J45", "-(C/2)*sind(2*a)", sourceVectors, dioptres(symbol+"_J45", v.J45), c, a)
}

// SphereCylinder adds the steps from a power vector to the minus-cylinder form p.
//
// Source: Thibos, Wheeler & Horner 1997.
func (d *Derivation) SphereCylinder(name, symbol string, v vergence.PowerVector) {
	m, x, y := dioptres("M", v.M), dioptres("J0", v.J0), dioptres("J45", v.J45)
	j := v.J()
	d.step(name+", half the cylinder", "sqrt(J0*J0 + J45*J45)", sourceVectors, dioptres(symbol+"_J", j), x, y)
	p := v.MinusCylinder()
	if p.Axis == 0 {
		d.step(name+", sphere (the cylinder rounds to 0.00)", "M", sourceVectors, dioptres(symbol+"_S", p.Sphere), m)
		return
	}
	d.step(name+", sphere", "M + J", sourceVectors, dioptres(symbol+"_S", p.Sphere), m, dioptres("J", j))
	d.step(name+", cylinder", "-2*J", sourceVectors, dioptres(symbol+"_C", p.Cylinder), dioptres("J", j))
	formula := "atan2d(J45, J0)/2"
	if unit.HalfAngle(float64(v.J45), float64(v.J0)) > 90 || v.J45 == 0 && v.J0 > 0 {
		formula = "atan2d(J45, J0)/2 + 180"
	}
	d.step(name+", axis", formula, sourceVectors+"; axes by ISO 8429", degrees(symbol+"_a", p.Axis), y, x)
}

// Travel adds the steps of the effectivity from the vergence from to the vergence to, over the gap of length d and index n,
// downstream (along the light) or upstream.
//
// Source: as vergence.PowerVector.Downstream.
func (d *Derivation) Travel(name, symbol string, from, to vergence.PowerVector, gap unit.Millimetre, n unit.Index, upstream bool) {
	q, formula := gap.Reduced(n), "d/(1000*n)"
	if upstream {
		q, formula = -q, "-d/(1000*n)"
	}
	metre := func(name string) Value { return Value{name, float64(q) + 0, "m"} }
	d.step(name+", reduced distance", formula, "definition of reduced distance; negative upstream", metre("q"), lengths("d", gap), indices("n", n))
	_, det := vergence.Gap(from, q)
	m, x, y := dioptres("M", from.M), dioptres("J0", from.J0), dioptres("J45", from.J45)
	d.step(name+", determinant", "(1 - q*M)*(1 - q*M) - (q*J0*(q*J0) + q*J45*(q*J45))", sourceEffectivity, plain("D", det), metre("q"), m, x, y)
	d.step(name+", M", "(M - q*(M*M - (J0*J0 + J45*J45)))/D", sourceEffectivity, dioptres(symbol+"_M", to.M), metre("q"), plain("D", det), m, x, y)
	d.step(name+", J0", "J0/D", sourceEffectivity, dioptres(symbol+"_J0", to.J0), x, plain("D", det))
	d.step(name+", J45", "J45/D", sourceEffectivity, dioptres(symbol+"_J45", to.J45), y, plain("D", det))
}

// Add adds the steps of the sum of two power vectors, or of their difference.
//
// Source: Thibos, Wheeler & Horner 1997.
func (d *Derivation) Add(name, symbol, nameA, nameB string, a, b, result vergence.PowerVector, subtract bool) {
	formula := nameA + " + " + nameB
	if subtract {
		formula = nameA + " - " + nameB
	}
	d.each(name, formula, sourceVectors, symbol+"_", result, func(c string) []Value {
		return []Value{dioptres(nameA, component(a, c)), dioptres(nameB, component(b, c))}
	})
}

// Surface adds the steps from principal radii to the power of a surface with index before in front and behind behind.
//
// Source: Long 1976.
func (d *Derivation) Surface(name, symbol string, r surface.Radii, c surface.Curvature, before, behind unit.Index) {
	step := behind.Less(before)
	power := c.Power(step)
	difference := plain("Dn", float64(step))
	d.step(name+", difference of the indices", "behind - before", sourceSurfaces, difference, indices("behind", behind), indices("before", before))
	flat, steep, a := lengths("r_flat", r.Flat), lengths("r_steep", r.Steep), degrees("a", r.FlatMeridian)
	d.step(name+", M", "Dn*((1000/r_flat + 1000/r_steep)/2)", sourceSurfaces, dioptres(symbol+"_M", power.M), difference, flat, steep)
	d.step(name+", J0", "Dn*(-((1000/r_steep - 1000/r_flat)/2)*cosd(2*a))", sourceSurfaces, dioptres(symbol+"_J0", power.J0), difference, flat, steep, a)
	d.step(name+", J45", "Dn*(-((1000/r_steep - 1000/r_flat)/2)*sind(2*a))", sourceSurfaces, dioptres(symbol+"_J45", power.J45), difference, flat, steep, a)
}

// Derivation tells how the fit was computed: from the refraction to the power required, and from the power ordered to the
// over-refraction and the acuity.
//
// Source: each step names its own.
func (r *Result) Derivation() []Step {
	var d Derivation
	n, t, nt := r.Body.Index, r.Body.CentreThickness, r.Layer.Index
	spectacle := r.Spectacle.Power()
	d.Vector("refraction at the spectacles", "F", r.Spectacle.Written(), spectacle)
	d.Travel("refraction at the cornea", "K", spectacle, r.Ocular.PowerVector, r.Spectacle.Vertex(), unit.Air, false)

	inTears := nt.Less(unit.Air)
	cornea, back := r.Cornea.Curvature().Power(inTears), r.Body.Back.Power(inTears)
	d.Surface("cornea against tears in air", "Fc", r.Cornea.Radii(), r.Cornea.Curvature(), unit.Air, nt)
	d.Surface("back of the lens against tears in air", "Fb", r.Radii, r.Body.Back, unit.Air, nt)
	d.tearLens(r)
	d.Add("vergence wanted in the tears at the cornea", "Lt", "K", "Fc", r.Ocular.PowerVector, cornea, r.Wanted.Cornea, false)
	d.Travel("the same at the back of the lens", "Lb", r.Wanted.Cornea, r.Wanted.Back, r.Layer.Apex, nt, true)
	d.Add("back vertex power required", "BVP", "Lb", "Fb", r.Wanted.Back, back, r.Wanted.Power.PowerVector, true)
	d.SphereCylinder("back vertex power required", "BVP", r.Wanted.Power.PowerVector)

	d.Vector("back vertex power ordered", "P", r.Power, r.PowerOrdered.PowerVector)
	against := r.Body.BackPower()
	d.Surface("back of the lens against air", "F2", r.Radii, r.Body.Back, n, unit.Air)
	inside := r.PowerOrdered.Sub(against)
	d.Add("vergence inside the ordered lens at its back", "Li", "P", "F2", r.PowerOrdered.PowerVector, against, inside, true)
	d.Travel("front surface power of the ordered lens", "F1", inside, r.Over.Made, t, n, true)
	change := r.Body.Back.Power(n.Less(nt))
	d.Surface("back of the lens, from tears into the lens", "F3", r.Radii, r.Body.Back, nt, n)
	d.Add("vergence needed inside the lens at its back", "Ln", "Lb", "F3", r.Wanted.Back, change, r.Over.Inside, false)
	d.Travel("the same at the front", "Lf", r.Over.Inside, r.Over.Front, t, n, true)
	d.Add("over-refraction at the front of the lens", "OR", "Lf", "F1", r.Over.Front, r.Over.Made, r.Over.Power, true)
	d.Travel("over-refraction at the vertex distance", "OV", r.Over.Power, r.OverWorn, r.Spectacle.Vertex(), unit.Air, true)

	over := r.Over.Power
	d.step("blur strength", "sqrt(M*M + J0*J0 + J45*J45)", sourceVectors, dioptres("B", r.Blur),
		dioptres("M", over.M), dioptres("J0", over.J0), dioptres("J45", over.J45))
	d.step("predicted loss of acuity in logMAR", "log10(1 + B*B)", sourceAcuity, plain("loss", r.AcuityLog), dioptres("B", r.Blur))
	d.step("predicted decimal acuity", "1/(1 + B*B)", sourceAcuity, plain("acuity", r.Acuity), dioptres("B", r.Blur))
	return d.steps
}

// tearLens adds the steps of the tear lens, from the difference of the curvatures.
func (d *Derivation) tearLens(r *Result) {
	difference := r.Body.Back.Sub(r.Cornea.Curvature())
	step := plain("Dn", float64(r.Layer.Index.Less(unit.Air)))
	curvature := func(name string, c unit.PerMetre) Value { return Value{name, float64(c), "m-1"} }
	b, c, f := r.Body.Back, r.Cornea.Curvature(), r.TearLens.PowerVector
	for _, x := range []struct {
		component             string
		back, cornea, differs unit.PerMetre
		power                 unit.Dioptre
	}{
		{"M", b.Mean, c.Mean, difference.Mean, f.M},
		{"J0", b.J0, c.J0, difference.J0, f.J0},
		{"J45", b.J45, c.J45, difference.J45, f.J45},
	} {
		d.step("tear lens, "+x.component, "Dn*(c_back - c_cornea)", sourceTears, dioptres("FT_"+x.component, x.power),
			step, curvature("c_back", x.back), curvature("c_cornea", x.cornea))
	}
}
