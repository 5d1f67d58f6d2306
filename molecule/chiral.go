package molecule

import "slices"

// Chiral says whether the graph with its stated stereo elements cannot be
// superposed on its mirror image. Handedness that no element states (helices,
// hindered rotation) is not seen.
func (m *Molecule) Chiral() bool { return m.lazy.chiral() }

func (m *Molecule) findChirality() bool {
	mirrored := slices.Clone(m.centres)
	for n := range mirrored {
		mirrored[n].Parity = -mirrored[n].Parity
	}
	for f := range m.fragments {
		v := m.view(f, true)
		v.setStereo(m.graph, f, m.centres, m.stereoBonds)
		if len(v.centres) == 0 {
			continue
		}
		image := m.view(f, true)
		image.setStereo(m.graph, f, mirrored, m.stereoBonds)
		if !slices.Equal(v.canonical().certificate, image.canonical().certificate) {
			return true
		}
	}
	return false
}
