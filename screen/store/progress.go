package store

import "database/sql"

// A Progress is how far one level of the run has come. It counts conformers at a
// tier, and structures where shapes are generated and ensembles made, of the
// ligands that the run has now. What is still to be planned is in no count: the
// planner knows it.
type Progress struct {
	Tier    string
	Key     Key
	Done    int
	Failed  int     // a result that says why there is none
	Waiting int     // units that nobody works on
	Running int     // units under lease
	Seconds float64 // that Done and Failed took, summed over cores
}

// Progress returns the run's levels from below.
func (v *View) Progress() ([]Progress, error) {
	run, there, err := v.Run()
	if err != nil || !there {
		return nil, err
	}
	var out []Progress
	keys := run.Chain.Keys()
	for i, key := range keys {
		table, failed := "answer", "error <> ''"
		switch i {
		case 0:
			table = "generation"
		case len(keys) - 1:
			table, failed = "ensemble", "NOT EXISTS (SELECT 1 FROM temperature t WHERE t.settings = r.settings AND t.structure = r.structure)"
		}
		p := Progress{Tier: run.Chain[i].Tier, Key: key}
		if err := v.count(&p, table, failed); err != nil {
			return nil, err
		}
		out = append(out, p)
	}
	return out, nil
}

func (v *View) count(p *Progress, table, failed string) error {
	const wanted = " WHERE settings = $1 AND structure IN (SELECT structure FROM ligand)"
	id := v.levels[p.Key].id
	err := v.tx.QueryRowContext(v.ctx, `SELECT count(*), count(CASE WHEN `+failed+` THEN 1 END), sum(seconds)
		FROM `+table+` r`+wanted, id).Scan(&p.Done, &p.Failed, number{&p.Seconds})
	if err != nil {
		return err
	}
	if p.Done == 0 {
		p.Seconds = 0 // a sum of nothing is NULL
	}
	p.Done -= p.Failed
	return v.tx.QueryRowContext(v.ctx, "SELECT count(CASE WHEN worker IS NULL THEN 1 END), count(worker) FROM unit"+wanted, id).
		Scan(&p.Waiting, &p.Running)
}

// A WorkerState is a worker as others see it.
type WorkerState struct {
	Name    string
	Machine Machine
	Begun   string
	Beat    int64 // a count: it moves while the worker lives
	Units   []Unit
}

// Workers returns who works on the run, by name, with the units that they hold.
func (v *View) Workers() ([]WorkerState, error) {
	var out []WorkerState
	var ids []string
	err := v.each(func(rows *sql.Rows) error {
		var w WorkerState
		var id string
		err := rows.Scan(&id, text{&w.Name}, text{&w.Begun}, &w.Beat, text{&w.Machine.Host}, text{&w.Machine.Processor},
			text{&w.Machine.Kernel}, text{&w.Machine.Version})
		out, ids = append(out, w), append(ids, id)
		return err
	}, `SELECT worker.id, worker.id, begun, beat, host, processor, kernel, version
		FROM worker JOIN machine ON machine.id = machine ORDER BY worker.id`)
	for i, id := range ids {
		if err == nil {
			out[i].Units, err = v.units("worker = $1", id)
		}
	}
	return out, err
}

// Units returns what is planned or under lease, in the order of the queue.
func (v *View) Units() ([]Unit, error) { return v.units("1 = 1") }

// Abandoned returns the units over which MaxAttempts workers died.
func (v *View) Abandoned() ([]Unit, error) {
	return v.units("worker IS NULL AND attempts >= $1", MaxAttempts)
}

func (v *View) units(which string, args ...any) ([]Unit, error) {
	var out []Unit
	err := v.each(func(rows *sql.Rows) error {
		var u Unit
		err := rows.Scan(&u.Key, &u.Structure, &u.Conformer, &u.Priority, &u.Attempts)
		out = append(out, u)
		return err
	}, `SELECT key, structure, conformer, priority, attempts
		FROM unit JOIN settings ON settings.id = unit.settings WHERE `+which+" ORDER BY priority, unit.id", args...)
	return out, err
}
