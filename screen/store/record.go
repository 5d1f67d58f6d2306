package store

// A Run is what was asked for last. A store holds one run; asking for more in
// the same store replaces this record and keeps the results.
type Run struct {
	Version string // of the program
	Begun   string // RFC 3339
	Record  string // JSON: all else that run.json says
	Chain   Chain
}

// A Ligand is one row of the run's list: what was read, and where its structure's
// results are found.
type Ligand struct {
	Order     int    // place in the list
	ID        string // no other ligand has it
	Stem      string // of its files; no other ligand has it, in any case of letters
	Parent    string // the id of the record, where this is one of its isomers
	Place     string // file, line and record
	SMILES    string // canonical; empty where nothing was read
	Structure int64  // Structure.ID; 0 for a ligand that has nothing to compute
	Mirrored  bool   // its shapes are the mirror images of the structure's

	// Status and Reason say how the reading ended, for a ligand without a
	// structure; for others they are empty and the ensemble tells.
	Status, Reason string
	Warnings       []string // of the reading
}

// A Structure is what results belong to: a molecule with its atoms in one order,
// and the shapes that the input gave for it. The same SMILES may stand in a store
// several times, drawn with other orders of atoms or with other shapes given.
type Structure struct {
	ID      int64  // within this store; 0: not stored yet
	SMILES  string // canonical
	NAtoms  int
	Drawing string      // whatever the program rebuilds the molecule from, in the order of the coordinates
	Starts  [][]float64 // shapes that the input gave, 3N each, bohr
}

// A Machine is where a result was made. Results are the same bytes on one kernel.
type Machine struct {
	Host      string
	Processor string
	Kernel    string // of the matrix routines
	Version   string // of the program
}

// A Work says where a result was made and in how long.
type Work struct {
	Seconds float64 // on one core
	Machine Machine // the zero value in a Commit: the store's own, see Options
}

// A Failure says why there is no result. The zero value is no failure.
type Failure struct {
	Error string // for a person
	Stack string // of a fault in the program, for the log
}

// A Generation is the generator's answer for a structure: one unit of work.
type Generation struct {
	Structure int64
	Key       Key // of the first level
	Failure
	Shapes   []Shape // by number, from 1
	Starts   int     // structures that were put together or embedded
	Embedded int     // of them without collisions
	Relaxed  int     // of them relaxed with the right stereo
	Found    int     // distinct shapes, before the cap
	Complete bool    // nothing was left untried
	Warnings []string
	Details  string // JSON of the program's, may be empty
	Work
}

// A Shape is one generated conformer. Its place in Generation.Shapes, counted
// from 1, is the conformer's number at all levels.
type Shape struct {
	Energy float64   // of the force field, hartree
	Family int       // the generator's family of shapes
	Hits   int       // starts that ended here
	X      []float64 // 3N, bohr; nil where it was read without coordinates
}

// An Answer is what a tier made of one conformer: one unit of work.
type Answer struct {
	Structure int64
	Key       Key // of the tier's level
	Conformer int // from 1
	Failure
	Energy    float64 // hartree; NaN: none
	Solvation float64 // the solvation part of it, hartree; NaN: none
	Doubts    []string
	Gradients int       // that the relaxation took
	X         []float64 // 3N, bohr; nil: as the level below left it
	Details   string    // JSON of the program's, may be empty
	Work
}

// An Ensemble is what became of a structure: one unit of work. It is also stored
// for a structure that failed, with its status and nothing else.
type Ensemble struct {
	Structure    int64
	Key          Key // of the last level
	Status       string
	Reason       string
	Stack        string         // of a fault in the program
	Entered      map[string]int // conformers that each tier looked at
	Members      []Member       // every conformer, by number
	Weights      []Weights      // by temperature, the one that ranks first
	MissedWeight float64        // expected; NaN: not known
	MissedP95    float64        // its 95th percentile; NaN: not known
	Warnings     []string
	Details      string // JSON of the program's, may be empty
	Work
}

// A Member says what became of one conformer.
type Member struct {
	Conformer int     // from 1
	Rank      int     // from 1 by final energy; 0: not in the ensemble
	Copies    int     // statistical weight; 0: not in the ensemble
	LastTier  string  // the last one that computed it
	Energy    float64 // final, hartree; NaN: none
	Thermal   float64 // the thermal part of it, hartree; NaN: none
	Why       string  // "kept", or why it went no further
	Details   string  // JSON of the program's, may be empty
}

// Weights are an ensemble at one temperature.
type Weights struct {
	Temperature float64 // kelvin
	FreeEnergy  float64 // hartree
	Energy      float64 // mean, hartree
	Entropy     float64 // conformational, hartree/kelvin
	Populations []Population
}

// A Population is the weight of one kept conformer, with its bar.
type Population struct {
	Conformer int     // from 1
	Fraction  float64 // the fractions of an ensemble sum to 1
	Low, High float64 // 5th and 95th percentile; NaN: not known
}

// A Unit is a lease on work: one structure at one level, or one conformer of it.
type Unit struct {
	Structure int64
	Key       Key
	Conformer int // 0 for a whole structure: a generation or an ensemble
	Priority  int // lower goes first; equals go in the order of their planning
	Attempts  int // workers that died while they held it; for readers
}
