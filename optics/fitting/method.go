package fitting

// Method is a published method that the computation uses.
type Method struct {
	Name, Purpose, Formula, Source string
}

// Methods are the published methods that the computation uses, in the order in which a fit needs them.
//
// Source: each names its own.
func Methods() []Method {
	return []Method{
		{"Power vectors", "sums and comparisons of sphero-cylinders, whatever their axes",
			"M = S + C/2, J0 = -(C/2) cos 2a, J45 = -(C/2) sin 2a, B = sqrt(M² + J0² + J45²)", sourceVectors},
		{"Effectivity", "a refraction at another distance from the eye; vergence through a gap",
			"L' = (I - (d/n) L)⁻¹ L", sourceEffectivity},
		{"Keratometric power", "a keratometer's dioptres and radii",
			"P = 1000 (n - 1)/r; 337.5/r for index 1.3375", "AJO 02-320, author's comments on keratometric indices"},
		{"Range extension of a keratometer", "readings through an auxiliary lens",
			"P × 1.1659 with +1.25 D, P × 0.8576 with -1.00 D", "published factors of a 36 to 52 D keratometer (teaching notes)"},
		{"Surface power", "toric surfaces at any axis",
			"F = (n' - n) C, C the curvature matrix", sourceSurfaces},
		{"Tear lens", "what the tears add under a rigid lens",
			"F_T = (n_t - 1)(C2 - C_c); thick: L_b' = (I + (g/n_t) L_t)⁻¹ L_t with L_t = K + (n_t - 1) C_c", sourceTears},
		{"Thick lens by stepping along", "front surface, front vertex power, over-refraction through the lens",
			"L_b = BVP + (n - 1) C2; F1 = (I + (t/n) L_b)⁻¹ L_b", sourceStepAlong},
		{"Conic sag", "depth of a cornea over a chord",
			"s = y²/(r + sqrt(r² - p y²)), p = 1 + Q = 1 - e²", "Baker 1943 (from memory); ISO 18369-1 (shape factor)"},
		{"Acuity from blur", "what a residual error costs",
			"MAR ∝ 1 + B²", sourceAcuity},
		{"Least residual blur", "the power to order, sphere and cylinder sought together",
			"min B(over-refraction) over the available powers", sourceVectors},
		{"Back curve by an offset from flat K", "the back optic zone radius where none is given",
			"r0 = 337.5/(337.5/r_flat + offset)", "common practice; on flat K to 0.50 D flatter: " + bennett},
		{"Toricity of a toric back", "the steep back radius where none is given",
			"max(2/3 ΔK, ΔK - 0.50 D)", choiceSteepRadius.Source},
	}
}
