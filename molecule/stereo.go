package molecule

// Centres returns the tetrahedral stereo centres, stated or not.
func (m *Molecule) Centres() []Centre { return m.centres }

// StereoBonds returns the double bonds with two configurations, stated or not.
func (m *Molecule) StereoBonds() []StereoBond { return m.stereoBonds }

func (d *draft) withStereo(g *graph) *Molecule {
	return &Molecule{graph: g}
}
