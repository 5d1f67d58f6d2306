package screen

import (
	"context"
	"fmt"
	"runtime/debug"

	"golang.org/x/sync/semaphore"
)

// A pool bounds what all ligands of a run do at a time: units of work by cores,
// surfaces by memory. Memory is always taken before a core, so nobody holds a
// core while waiting for memory.
type pool struct {
	cores  *semaphore.Weighted
	memory *semaphore.Weighted
	bytes  int64
}

func newPool(jobs int, bytes int64) *pool {
	return &pool{cores: semaphore.NewWeighted(int64(jobs)), memory: semaphore.NewWeighted(bytes), bytes: bytes}
}

// hold takes memory for a surface until release is called. A surface that needs
// more than all gets all, and runs alone.
func (p *pool) hold(ctx context.Context, bytes int64) (release func(), err error) {
	bytes = min(max(bytes, 1), p.bytes)
	if err := p.memory.Acquire(ctx, bytes); err != nil {
		return nil, err
	}
	return func() { p.memory.Release(bytes) }, nil
}

// unit runs one unit of work on a core. A panic in it ends here: it becomes the
// unit's error.
func (p *pool) unit(ctx context.Context, work func() error) (err error) {
	if err := p.cores.Acquire(ctx, 1); err != nil {
		return err
	}
	defer p.cores.Release(1)
	return Guard(work)
}

// Guard turns a panic of work into a *Fault.
func Guard(work func() error) (err error) {
	defer func() {
		if v := recover(); v != nil {
			err = &Fault{Value: v, Stack: string(debug.Stack())}
		}
	}()
	return work()
}

// A Fault is a panic that was caught at the border of a unit of work: a mistake
// in the program, not in the input. The stack is for the log.
type Fault struct {
	Value any
	Stack string
}

func (f *Fault) Error() string {
	return fmt.Sprintf("a fault in the program (please report it): %v", f.Value)
}
