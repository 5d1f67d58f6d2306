package load

import (
	"fmt"
	"io"

	"torsieve/internal/textline"
	"torsieve/molecule"
)

// WriteSMILES writes one line of a .smi file: the canonical SMILES, a tab and
// the id, on one line whatever it holds.
func WriteSMILES(w io.Writer, m *molecule.Molecule, id string) error {
	_, err := fmt.Fprintf(w, "%s\t%s\n", m.SMILES(), textline.Clean(id))
	return err
}
