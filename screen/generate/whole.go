package generate

import (
	"context"
	"errors"
)

// Shares of the budget that are embedded as a whole, beside what is put
// together from fragments: one in so many, within limits.
const (
	wholeShare = 20
	fewestRuns = 4
	mostRuns   = 30
	hopeless   = 10 // embeddings none of which relaxes to the stated stereo
)

// embedded relaxes embeddings of the whole molecule: a second opinion on what
// the assembly can make, and the only way where it can make nothing.
func (s *search) embedded(ctx context.Context) error {
	runs := min(mostRuns, max(fewestRuns, s.budget()/wholeShare))
	if len(s.pool) == 0 {
		runs = max(fewestRuns, s.budget()/2)
	}
	for k := range runs {
		s.result.Starts++
		x, err := s.embedder.next(ctx, stream(s.o.Seed, s.id, streamWhole, k))
		if ctx.Err() != nil {
			return ctx.Err()
		}
		if err != nil {
			s.failure = err
			if len(s.pool) > 0 || k >= 2 {
				break
			}
			continue
		}
		s.result.Embedded++
		if err := s.add(ctx, x, recipe{}, false); err != nil {
			return err
		}
		if len(s.pool) == 0 && k >= hopeless {
			break
		}
	}
	if len(s.pool) == 0 {
		return s.giveUp()
	}
	return nil
}

// giveUp says why there is not a single structure.
func (s *search) giveUp() error {
	var e *EmbedError
	if errors.As(s.failure, &e) {
		return e
	}
	return &EmbedError{Attempts: s.result.Starts, Reason: s.failure.Error()}
}
