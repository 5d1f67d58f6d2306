package forcefield

import "torsieve/internal/units"

// polarShare is what a polar hydrogen keeps of its van der Waals distance.
func (o Options) polarShare() float64 {
	if o.PolarHydrogens && o.Charges == "eeq" {
		return 0.85
	}
	return 1
}

// skeleton hands the types over, with corrected lengths where o asks for them.
func (t *typing) skeleton(o Options) *skeleton {
	var links []link
	for k, b := range t.m.Bonds() {
		l := link{i: b.A, j: b.B, order: t.orders[k]}
		if o.Corrections {
			l.length = t.length(k)
		}
		links = append(links, l)
	}
	return newSkeleton(t.types(), links)
}

// bonded returns the terms along bonds, in the order in which they are added
// up and shown. t may be nil: then nothing beyond the published terms is known.
// open is that of bends.
func (s *skeleton) bonded(o Options, t *typing, open bool) []term {
	var angles angleRule
	var scale func(int) float64
	if t != nil {
		angles = t.angles(o)
	}
	if t != nil && o.Corrections {
		scale = t.scale
	}
	terms := []term{
		s.stretches(), s.bends(angles, open), s.torsions(scale), s.inversions(o.nitrogenBarrier() * units.KcalPerMol),
	}
	if t != nil && o.Corrections {
		terms = append(terms, t.corrections(s))
	}
	return terms
}
