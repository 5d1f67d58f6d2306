package store

import (
	"context"
	"database/sql"
	"errors"
	"slices"
)

// A View is one consistent picture of a store: what was committed when it began,
// and nothing that came after. It belongs to one goroutine.
//
// Structures, keys and conformers that are not there give empty answers, not
// errors.
type View struct {
	ctx    context.Context
	tx     *sql.Tx
	levels map[Key]level
}

// A level is a row of settings.
type level struct {
	Level
	id    int64
	below Key
}

// View lets look read. Writers are not kept waiting, but for a file on a network
// file system; a view that is held for long lets the log beside a file grow.
func (r *Reader) View(ctx context.Context, look func(*View) error) error {
	tx, err := r.read.BeginTx(ctx, r.snapshot)
	if err != nil {
		return r.fault(r.where, err)
	}
	defer rollback(tx)
	v := &View{ctx: ctx, tx: tx, levels: map[Key]level{}}
	err = v.loadLevels()
	if err == nil {
		err = look(v)
	}
	return r.fault(r.where, err)
}

func (v *View) each(scan func(*sql.Rows) error, query string, args ...any) error {
	return each(v.ctx, v.tx, scan, query, args...)
}

func (v *View) loadLevels() error {
	keys := map[int64]Key{}
	return v.each(func(rows *sql.Rows) error {
		var l level
		var key Key
		var below sql.NullInt64
		err := rows.Scan(&l.id, &key, &below, text{&l.Tier}, text{&l.Settings})
		keys[l.id] = key
		l.below = keys[below.Int64]
		v.levels[key] = l
		return err
	}, "SELECT id, key, below, tier, settings FROM settings ORDER BY id") // below comes before
}

// ladder lists the keys from the first level to key.
func (v *View) ladder(key Key) []Key {
	var keys []Key
	for ; key != ""; key = v.levels[key].below {
		if _, known := v.levels[key]; !known {
			return nil
		}
		keys = append(keys, key)
	}
	slices.Reverse(keys)
	return keys
}

// unless is err, or nil where it is the one that says what was asked for.
func unless(err, expected error) error {
	if errors.Is(err, expected) {
		return nil
	}
	return err
}
