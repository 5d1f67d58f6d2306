package load

import (
	"fmt"
	"strings"

	"torsieve/internal/textline"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
)

// compareStereo warns where a data item of a 3D record holds a SMILES of the
// same molecule with another configuration than the coordinates have, which
// count.
func compareStereo(rec *Record) {
	if rec.X == nil {
		return
	}
	for _, f := range rec.Fields {
		if !strings.Contains(strings.ToLower(f.Name), "smiles") {
			continue
		}
		stated, _, err := smiles.Parse(strings.TrimSpace(f.Value))
		if err != nil {
			rec.Warnings = append(rec.Warnings, fmt.Sprintf("the data item %s holds no SMILES: %v", textline.Quote(f.Name), err))
			continue
		}
		if contradicts(stated, rec.Mol) {
			rec.Warnings = append(rec.Warnings, fmt.Sprintf("the SMILES in %s contradicts the configuration of the 3D coordinates (%s); the coordinates count",
				textline.Quote(f.Name), rec.Mol.SMILES()))
		}
	}
}

// contradicts says whether two molecules differ in stated stereo alone.
func contradicts(stated, seen *molecule.Molecule) bool {
	if stated.SMILES() == seen.SMILES() || withoutStereo(stated) != withoutStereo(seen) {
		return false
	}
	// Unstated elements of the SMILES may be either way.
	const many = 64
	isomers, err := stated.Isomers(many)
	if err != nil {
		return false // too many to say
	}
	for _, m := range isomers {
		if m.SMILES() == seen.SMILES() {
			return false
		}
	}
	return true
}

// withoutStereo returns a canonical SMILES without marks of configuration.
func withoutStereo(m *molecule.Molecule) string {
	bare := strings.NewReplacer("@", "", "/", "", `\`, "").Replace(m.SMILES())
	if again, _, err := smiles.Parse(bare); err == nil {
		return again.SMILES()
	}
	return bare
}
