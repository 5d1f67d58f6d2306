package store

import (
	"context"
	"database/sql"
	"time"
)

// A Worker takes units. It counts heartbeats while it lives; what it held when it
// died is taken back by the others. Methods may be called by several goroutines
// but for TakeBack and Tend, which one of them calls.
type Worker struct {
	s    *Store
	id   string
	name string // the same, not packed
	born string
	seen map[string]sight
}

// A sight is when a worker's count was last seen to change.
type sight struct {
	beat int64
	at   time.Time
}

// Join enters a worker under a name that no other has: host, process and when it
// began, say. begun is a time for a person, RFC 3339.
func (s *Store) Join(ctx context.Context, name, begun string) (*Worker, error) {
	w := &Worker{s: s, id: pack(name), name: name, born: begun, seen: map[string]sight{}}
	return w, w.Beat(ctx)
}

// Name is what the worker joined as.
func (w *Worker) Name() string { return w.name }

// Beat says that the worker lives. One that was given up joins again; its units
// have gone to others, and what it still finishes is stored if they were slower.
func (w *Worker) Beat(ctx context.Context) error {
	return w.s.update(ctx, w.beat)
}

func (w *Worker) beat(t *txn) error {
	n, err := t.affected("UPDATE worker SET beat = beat + 1 WHERE id = $1", w.id)
	if err != nil || n > 0 {
		return err
	}
	machine, err := t.machine(Machine{})
	if err != nil {
		return err
	}
	return t.exec("INSERT INTO worker (id, machine, begun, beat) VALUES ($1, $2, $3, 0)", w.id, machine, pack(w.born))
}

// Leave gives back what the worker holds and strikes it off the list. ctx should
// not be the one whose end made it leave.
func (w *Worker) Leave(ctx context.Context) error {
	return w.s.update(ctx, func(t *txn) error {
		if err := t.exec("UPDATE unit SET worker = NULL WHERE worker = $1", w.id); err != nil {
			return err
		}
		return t.exec("DELETE FROM worker WHERE id = $1", w.id)
	})
}

// TakeBack frees the units of workers whose count has not moved for so long,
// and returns how many units that were. now is the caller's own clock, which must
// never jump (time.Now of one process does not: it carries a monotonic reading);
// clocks of other machines do not matter. The first call can only look.
func (w *Worker) TakeBack(ctx context.Context, now time.Time, silence time.Duration) (units int, err error) {
	beats, err := w.s.beats(ctx)
	if err != nil {
		return 0, err
	}
	for id, beat := range beats {
		if last, known := w.seen[id]; !known || last.beat != beat {
			w.seen[id] = sight{beat, now}
		}
	}
	err = w.s.update(ctx, func(t *txn) error {
		units = 0
		for id, last := range w.seen {
			if _, there := beats[id]; !there || id == w.id || now.Sub(last.at) < silence {
				continue
			}
			// A beat that came meanwhile saves it.
			if err := t.exec("DELETE FROM worker WHERE id = $1 AND beat = $2", id, last.beat); err != nil {
				return err
			}
		}
		units, err = t.affected(`UPDATE unit SET worker = NULL, attempts = attempts + 1
			WHERE worker IS NOT NULL AND worker NOT IN (SELECT id FROM worker)`)
		return err
	})
	for id := range w.seen {
		if _, there := beats[id]; !there {
			delete(w.seen, id)
		}
	}
	return units, err
}

// beats reads every worker's count.
func (s *Store) beats(ctx context.Context) (map[string]int64, error) {
	beats := map[string]int64{}
	err := s.View(ctx, func(v *View) error {
		return each(ctx, v.tx, func(rows *sql.Rows) error {
			var id string
			var beat int64
			err := rows.Scan(&id, &beat)
			beats[id] = beat
			return err
		}, "SELECT id, beat FROM worker")
	})
	return beats, err
}

// Tend beats and takes back at every tick until ctx ends, from a goroutine that
// does not compute. tell is told of units that were taken back, and of errors: a
// database that cannot be reached for a while is no reason to end.
func (w *Worker) Tend(ctx context.Context, ticks <-chan time.Time, silence time.Duration, tell func(units int, err error)) {
	for {
		select {
		case <-ctx.Done():
			return
		case now := <-ticks:
			err := w.Beat(ctx)
			var units int
			if err == nil {
				units, err = w.TakeBack(ctx, now, silence)
			}
			if ctx.Err() == nil && (units > 0 || err != nil) {
				tell(units, err)
			}
		}
	}
}
