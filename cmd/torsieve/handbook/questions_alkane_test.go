package handbook

// Shapes of chains are those of the published geometries, to within some
// degrees.
var butane = specimen{"butane", "CCCC", []question{
	gap("butane gauche", alkanes, minimum(along(0, 180)...), minimum(along(0, 64)...)),
	gap("butane gauche enthalpy", alkanes, minimum(along(0, 180)...), minimum(along(0, 64)...)),
	gap("butane barrier", barriers, minimum(along(0, 180)...), barrierTop(dihedral{0, 1, 2, 3}, 110, 115, 120, 125, 130)),
	gap("butane syn", barriers, minimum(along(0, 180)...), held(along(0, 0)...)),
	angle("butane gauche angle", dihedral{0, 1, 2, 3}, along(0, 64)...),
	count("butane minima", 20),
}}

var pentane = specimen{"pentane", "CCCCC", []question{
	gap("pentane tg", alkanes, minimum(along(0, 180, 180)...), minimum(along(0, 176, 64)...)),
	gap("pentane gg", alkanes, minimum(along(0, 180, 180)...), minimum(along(0, 58, 58)...)),
	gap("pentane gx", alkanes, minimum(along(0, 180, 180)...), minimum(along(0, -95, 60)...)),
	angle("pentane gg angle", dihedral{0, 1, 2, 3}, along(0, 58, 58)...),
	angle("pentane gx large angle", dihedral{0, 1, 2, 3}, along(0, -95, 60)...),
	angle("pentane gx small angle", dihedral{1, 2, 3, 4}, along(0, -95, 60)...),
	count("pentane minima", 20),
}}

var hexane = specimen{"hexane", "CCCCCC", append(hexaneGaps(), count("hexane minima", 20))}

func hexaneGaps() []question {
	ttt := minimum(along(0, 180, 180, 180)...)
	var all []question
	for _, c := range []struct {
		fact string
		to   [3]float64
	}{
		{"hexane gtt", [3]float64{64, 176, 180}},
		{"hexane tgt", [3]float64{176, 64, 176}},
		{"hexane tgg", [3]float64{175, 58, 58}},
		{"hexane gtg", [3]float64{63, 171, 63}},
		{"hexane gtG", [3]float64{65, 180, -65}},
		{"hexane ggg", [3]float64{59, 56, 59}},
		{"hexane gxt", [3]float64{60, -96, 178}},
		{"hexane tgx", [3]float64{176, 60, -94}},
		{"hexane gxg", [3]float64{61, -98, -72}},
		{"hexane xgg", [3]float64{92, -62, -63}},
		{"hexane xgx", [3]float64{90, -61, 90}},
	} {
		all = append(all, gap(c.fact, alkanes, ttt, minimum(along(0, c.to[:]...)...)))
	}
	return all
}
