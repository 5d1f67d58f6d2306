-- Read docs/store.md. {id}, {int}, {real}, {blob} and {clustered} are the database's own words.

CREATE TABLE torsieve_store (
  id      {int} PRIMARY KEY CHECK (id = 1),
  version {int} NOT NULL,
  program TEXT  NOT NULL
);

CREATE TABLE settings (
  id       {id},
  key      TEXT NOT NULL UNIQUE,
  below    {int} REFERENCES settings (id),
  first    {int} REFERENCES settings (id),
  tier     TEXT NOT NULL,
  settings TEXT NOT NULL
);

CREATE TABLE run (
  id       {int} PRIMARY KEY CHECK (id = 1),
  version  TEXT NOT NULL,
  begun    TEXT NOT NULL,
  settings {int} REFERENCES settings (id),
  record   TEXT NOT NULL
);

CREATE TABLE structure (
  id          {id},
  smiles      TEXT  NOT NULL,
  variant     TEXT  NOT NULL,
  natoms      {int} NOT NULL,
  drawing     TEXT  NOT NULL,
  starts_bohr {blob},
  UNIQUE (smiles, variant)
);

CREATE TABLE ligand (
  place_in_run {int} PRIMARY KEY,
  id           TEXT  NOT NULL UNIQUE,
  stem         TEXT  NOT NULL UNIQUE,
  parent       TEXT  NOT NULL,
  source       TEXT  NOT NULL,
  smiles       TEXT  NOT NULL,
  structure    {int} REFERENCES structure (id),
  mirrored     {int} NOT NULL,
  status       TEXT  NOT NULL,
  reason       TEXT  NOT NULL,
  warnings     TEXT  NOT NULL
);
CREATE INDEX ligand_structure ON ligand (structure);

CREATE TABLE machine (
  id        {id},
  host      TEXT NOT NULL,
  processor TEXT NOT NULL,
  kernel    TEXT NOT NULL,
  version   TEXT NOT NULL,
  UNIQUE (host, processor, kernel, version)
);

CREATE TABLE generation (
  settings  {int} NOT NULL REFERENCES settings (id),
  structure {int} NOT NULL REFERENCES structure (id),
  error     TEXT  NOT NULL,
  stack     TEXT  NOT NULL,
  starts    {int} NOT NULL,
  embedded  {int} NOT NULL,
  relaxed   {int} NOT NULL,
  found     {int} NOT NULL,
  complete  {int} NOT NULL,
  warnings  TEXT  NOT NULL,
  seconds   {real} NOT NULL,
  machine   {int} REFERENCES machine (id),
  details   TEXT  NOT NULL,
  PRIMARY KEY (settings, structure)
);

CREATE TABLE shape (
  settings       {int}  NOT NULL,
  structure      {int}  NOT NULL,
  conformer      {int}  NOT NULL,
  energy_hartree {real} NOT NULL,
  family         {int}  NOT NULL,
  hits           {int}  NOT NULL,
  PRIMARY KEY (settings, structure, conformer),
  FOREIGN KEY (settings, structure) REFERENCES generation (settings, structure)
){clustered};

CREATE TABLE answer (
  settings          {int} NOT NULL REFERENCES settings (id),
  structure         {int} NOT NULL REFERENCES structure (id),
  conformer         {int} NOT NULL,
  energy_hartree    {real},
  solvation_hartree {real},
  error             TEXT  NOT NULL,
  stack             TEXT  NOT NULL,
  doubts            TEXT  NOT NULL,
  gradients         {int} NOT NULL,
  seconds           {real} NOT NULL,
  machine           {int} REFERENCES machine (id),
  details           TEXT  NOT NULL,
  PRIMARY KEY (settings, structure, conformer)
){clustered};
CREATE INDEX answer_failed ON answer (settings, structure, conformer) WHERE error <> '';

CREATE TABLE geometry (
  settings  {int}  NOT NULL,
  structure {int}  NOT NULL REFERENCES structure (id),
  conformer {int}  NOT NULL,
  x_bohr    {blob} NOT NULL,
  PRIMARY KEY (settings, structure, conformer)
);

CREATE TABLE ensemble (
  settings          {int} NOT NULL REFERENCES settings (id),
  structure         {int} NOT NULL REFERENCES structure (id),
  status            TEXT  NOT NULL,
  reason            TEXT  NOT NULL,
  stack             TEXT  NOT NULL,
  entered           TEXT  NOT NULL,
  missed_weight     {real},
  missed_weight_p95 {real},
  warnings          TEXT  NOT NULL,
  seconds           {real} NOT NULL,
  machine           {int} REFERENCES machine (id),
  details           TEXT  NOT NULL,
  PRIMARY KEY (settings, structure)
);

CREATE TABLE member (
  settings        {int} NOT NULL,
  structure       {int} NOT NULL,
  conformer       {int} NOT NULL,
  rank            {int} NOT NULL,
  copies          {int} NOT NULL,
  last_tier       TEXT  NOT NULL,
  energy_hartree  {real},
  thermal_hartree {real},
  why             TEXT  NOT NULL,
  details         TEXT  NOT NULL,
  PRIMARY KEY (settings, structure, conformer),
  FOREIGN KEY (settings, structure) REFERENCES ensemble (settings, structure)
){clustered};

CREATE TABLE temperature (
  settings                  {int}  NOT NULL,
  structure                 {int}  NOT NULL,
  place                     {int}  NOT NULL,
  temperature_k             {real} NOT NULL,
  free_energy_hartree       {real} NOT NULL,
  energy_hartree            {real} NOT NULL,
  entropy_hartree_per_k     {real} NOT NULL,
  PRIMARY KEY (settings, structure, place),
  FOREIGN KEY (settings, structure) REFERENCES ensemble (settings, structure)
){clustered};

CREATE TABLE population (
  settings       {int}  NOT NULL,
  structure      {int}  NOT NULL,
  place          {int}  NOT NULL,
  rank           {int}  NOT NULL,
  conformer      {int}  NOT NULL,
  population     {real} NOT NULL,
  population_p05 {real},
  population_p95 {real},
  PRIMARY KEY (settings, structure, place, rank),
  FOREIGN KEY (settings, structure, place) REFERENCES temperature (settings, structure, place)
){clustered};

CREATE TABLE worker (
  id      TEXT  PRIMARY KEY,
  machine {int} NOT NULL REFERENCES machine (id),
  begun   TEXT  NOT NULL,
  beat    {int} NOT NULL
);

CREATE TABLE unit (
  id        {id},
  settings  {int} NOT NULL REFERENCES settings (id),
  structure {int} NOT NULL REFERENCES structure (id),
  conformer {int} NOT NULL,
  priority  {int} NOT NULL,
  attempts  {int} NOT NULL,
  worker    TEXT,
  UNIQUE (settings, structure, conformer)
);
CREATE INDEX unit_free ON unit (priority, id) WHERE worker IS NULL;
CREATE INDEX unit_taken ON unit (worker) WHERE worker IS NOT NULL;

CREATE TABLE holder (
  id      {int} PRIMARY KEY CHECK (id = 1),
  program TEXT  NOT NULL,
  host    TEXT  NOT NULL,
  pid     {int} NOT NULL,
  begun   TEXT  NOT NULL
);
