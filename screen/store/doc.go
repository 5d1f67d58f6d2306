// Package store is the run's database: what of a run survives a power cut. It is
// the one place that knows SQL, and it knows no chemistry.
//
// Four kinds of things stand in it:
//
//   - the run: its settings, level by level, and its ligands ([Run], [Ligand],
//     [Structure]);
//   - results: shapes that were generated, answers of the tiers, ensembles
//     ([Generation], [Answer], [Ensemble]). They are the truth. A result belongs
//     to a structure and to the [Key] of all settings that it depends on, so it
//     serves any later run that agrees in them;
//   - units, the queue: leases on work that somebody planned ([Unit]). Nobody asks
//     them what is done;
//   - workers, who hold leases and count heartbeats ([Worker]).
//
// A [Store] writes, a [Reader] reads; both are opened by the path of a SQLite
// file or by a PostgreSQL URL. Everything that is read goes through a [View],
// which is one consistent picture however much is written meanwhile. [Store.Commit]
// writes finished units and ends their leases in one transaction.
//
// Coordinates are bohr, energies hartree, times seconds. Text, JSON and drawings
// come back as they were given. The tables, for readers with a SQL shell, are
// described in docs/store.md.
package store
