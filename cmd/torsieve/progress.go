package main

import (
	"fmt"
	"math"
	"os"
	"time"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"
)

// A progress shows how far a command is.
type progress interface {
	set(part float64, text string) // part from 0 to 1
	close()
}

// newProgress returns a bar on a terminal, and elsewhere a line a minute. It
// takes the voice over: a message first clears the bar.
func newProgress(v *voice) progress {
	switch f, isFile := v.w.(*os.File); {
	case v.quiet:
		return silent{}
	case isFile && term.IsTerminal(int(f.Fd())) && os.Getenv("TERM") != "dumb":
		return newBar(v, f)
	}
	return &lines{voice: v, last: time.Now()}
}

type silent struct{}

func (silent) set(float64, string) {}
func (silent) close()              {}

// lines says at most once a minute that work goes on.
type lines struct {
	voice *voice
	last  time.Time
}

func (l *lines) set(part float64, text string) {
	if now := time.Now(); now.Sub(l.last) >= time.Minute {
		l.last = now
		l.voice.note("%s: %s of the work", text, percent(part))
	}
}

func (l *lines) close() {}

// barSteps is how finely a bar moves.
const barSteps = 1000

// bar is the one bar of the program, with a time of arrival of its own: the
// library's counts what came from elsewhere as done now.
type bar struct {
	voice *voice
	bar   *progressbar.ProgressBar
	begun time.Time
}

func newBar(v *voice, f *os.File) *bar {
	b := &bar{voice: v, begun: time.Now()}
	b.bar = progressbar.NewOptions(barSteps,
		progressbar.OptionSetWriter(f), progressbar.OptionSetWidth(20), progressbar.OptionThrottle(200*time.Millisecond),
		progressbar.OptionUseANSICodes(true), progressbar.OptionClearOnFinish(),
		progressbar.OptionSetPredictTime(false), progressbar.OptionSetElapsedTime(false),
		progressbar.OptionEnableColorCodes(os.Getenv("NO_COLOR") == ""),
	)
	v.mu.Lock()
	defer v.mu.Unlock()
	v.before = func() { _ = b.bar.Clear() } // a terminal that is gone needs no clearing
	return b
}

func (b *bar) set(part float64, text string) {
	b.voice.mu.Lock()
	defer b.voice.mu.Unlock()
	left := time.Duration(float64(time.Since(b.begun)) * (1 - part) / math.Max(part, 1e-6))
	if part > 0.02 && left > 10*time.Second {
		text += fmt.Sprintf(" · about %s left", left.Round(roundTo(left)))
	}
	b.bar.Describe(printable(text))
	_ = b.bar.Set(int(part * barSteps))
}

// roundTo is the precision that an estimate deserves.
func roundTo(d time.Duration) time.Duration {
	switch {
	case d > time.Hour:
		return 10 * time.Minute
	case d > 10*time.Minute:
		return time.Minute
	}
	return 10 * time.Second
}

func (b *bar) close() {
	b.voice.mu.Lock()
	defer b.voice.mu.Unlock()
	b.voice.before = nil
	_ = b.bar.Finish()
}
