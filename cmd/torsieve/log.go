package main

import (
	"context"
	"io"
	"log/slog"

	"torsieve/screen"
)

// A logger writes every step of a run as a line of JSON.
type logger struct{ log *slog.Logger }

func newLogger(w io.Writer) *logger {
	return &logger{slog.New(slog.NewJSONHandler(w, &slog.HandlerOptions{Level: slog.LevelDebug}))}
}

// write logs an event: Debug for a conformer, Info for a ligand, Warn for what
// was refused, Error for what failed.
func (l *logger) write(e screen.Event) {
	ctx := context.Background()
	switch e.Kind {
	case screen.Begun:
		l.log.DebugContext(ctx, "ligand begun", "ligand", e.Ligand)
	case screen.Entered:
		l.log.DebugContext(ctx, "tier entered", "ligand", e.Ligand, "tier", e.Tier, "conformers", e.Total)
	case screen.Computed:
		l.computed(ctx, e)
	case screen.Ended:
		level := slog.LevelInfo
		switch e.Result.Status {
		case screen.Refused, screen.Unreadable, screen.Stopped, screen.Partial:
			level = slog.LevelWarn
		case screen.Failed:
			level = slog.LevelError
		case screen.Done:
		}
		l.log.Log(ctx, level, "ligand ended", "ligand", e.Ligand, "status", string(e.Result.Status),
			"reason", e.Result.Reason, "conformers", len(e.Result.Kept), "seconds", e.Took.Seconds(),
			"warnings", e.Result.Warnings)
	}
}

func (l *logger) computed(ctx context.Context, e screen.Event) {
	attrs := []any{"ligand", e.Ligand, "tier", e.Tier, "conformer", e.Conformer, "seconds", e.Took.Seconds(), "gradients", e.Gradients, "stored", e.Stored}
	if e.Err == nil {
		l.log.DebugContext(ctx, "conformer computed", append(attrs, "energy_hartree", e.Energy)...)
		return
	}
	attrs = append(attrs, "err", e.Err.Error())
	if e.Stack != "" {
		attrs = append(attrs, "stack", e.Stack)
	}
	l.log.WarnContext(ctx, "conformer failed", attrs...)
}
