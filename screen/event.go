package screen

import "time"

// A Kind says what an Event is about.
type Kind int

// The kinds of events, in the order in which a ligand meets them.
const (
	Begun    Kind = iota // a ligand was begun
	Entered              // a ligand entered a tier with Total conformers
	Computed             // one conformer of it was computed
	Ended                // a ligand is done, refused or failed
)

// An Event is what a watcher of a run sees. Fields that do not belong to a kind
// are zero.
type Event struct {
	Kind      Kind
	Ligand    string
	Tier      string        // Entered, Computed: its name, or ThermalStage
	Total     int           // Entered: conformers that the tier will look at
	Conformer int           // Computed: its number
	Took      time.Duration // Computed, Ended
	Energy    float64       // Computed: hartree
	Gradients int           // Computed: of a relaxation, else 0
	Stored    bool          // Computed: by an earlier run
	Err       error         // Computed: why there is no energy
	Stack     string        // where a fault of the program happened, else ""
	Result    *Result       // Ended; not to be changed or kept
}
