package handbook

import "math"

// A class is a kind of fact, and what is known of each tier's error for it: the
// mean absolute deviation from high-level energies, in the facts' unit. NaN: no
// figure is known.
type class struct {
	name            string
	field, gfn2, hf float64
	from            string
}

var none = math.NaN()

// The figures of GFN2-xTB and HF-3c on aconf, amino20x4 and but14diol are single
// points of these tiers at the published geometries, each conformer against the
// lowest: those of GFN2-xTB are also in testdata/reference/gfn2/conformers.json.gz
// (from another program). TestKnownErrors repeats the ones of alkanes.
var (
	alkanes = class{"alkanes", 0.72, 0.19, 0.89,
		"15 pairs of ACONF (Gruzman, Karton, Martin 2009, as in GMTKN55), single points"}
	diols = class{"diols", 0.72, 1.25, 0.58,
		"64 pairs of BUT14DIOL (Kozuch, Bachrach, Martin 2014, as in GMTKN55), single points"}
	peptides = class{"peptides", 0.72, 0.95, none,
		"80 pairs of Amino20x4 (Kesharwani, Karton, Martin 2016, as in GMTKN55), single points"}
	minima = class{"minima", 0.72, 0.48, 0.34,
		"Folmsbee, Hutchison 2021, against DLPNO-CCSD(T): GFN2-xTB 684 molecules, published; HF-3c 38 of them, computed with another program; force field relaxed, 128 of them"}
	barriers = class{"barriers", none, 0.67, 0.85,
		"59 torsion scans of Behara et al. 2024, against CCSD(T)/CBS, published columns"}
	angles = class{"angles", 4, 4, none, ""}
	counts = class{"counts", 0, 0, none, "a number of minima is right or wrong"}
)
