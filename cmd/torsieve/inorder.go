package main

import (
	"context"
	"errors"

	"torsieve/molecule/load"
)

// parallel computes answers 0 to n-1 on several cores. The function that it
// returns waits for answer i, or for the end of ctx; it must be asked in order.
func parallel[T any](ctx context.Context, n, jobs int, compute func(i int) T) func(i int) (T, error) {
	answers := make([]chan T, n)
	for i := range answers {
		answers[i] = make(chan T, 1)
	}
	cores := make(chan struct{}, jobs)
	go func() {
		for i := range n {
			select {
			case cores <- struct{}{}:
			case <-ctx.Done():
				return
			}
			go func() {
				defer func() { <-cores }()
				answers[i] <- compute(i)
			}()
		}
	}()
	return func(i int) (answer T, err error) {
		select {
		case answer = <-answers[i]:
			return answer, nil
		case <-ctx.Done():
			return answer, context.Cause(ctx)
		}
	}
}

// errEnough ends the reading when nobody wants the answers any more.
var errEnough = errors.New("enough")

// inOrder computes the records of a file on several cores and hands the answers
// on in the file's order. Only a few records per core wait at a time, however
// long the file is. use is called by one goroutine.
func inOrder[T any](s *session, file string, in inputOptions, jobs int, compute func(load.Record) T, use func(load.Record, T) error) error {
	type task struct {
		rec    load.Record
		answer chan T
	}
	ctx, enough := context.WithCancelCause(s.ctx)
	defer enough(errEnough)
	queue := make(chan task, jobs) // in the file's order
	cores := make(chan struct{}, jobs)
	read := make(chan error, 1)
	go func() {
		defer close(queue)
		read <- s.records(file, in, func(rec load.Record) error {
			t := task{rec: rec, answer: make(chan T, 1)}
			select {
			case cores <- struct{}{}:
			case <-ctx.Done():
				return context.Cause(ctx)
			}
			go func() {
				defer func() { <-cores }()
				t.answer <- compute(rec)
			}()
			select {
			case queue <- t:
				return nil
			case <-ctx.Done():
				return context.Cause(ctx)
			}
		})
	}()
	for t := range queue {
		select {
		case answer := <-t.answer:
			if err := use(t.rec, answer); err != nil {
				return err
			}
		case <-ctx.Done():
			return context.Cause(ctx)
		}
	}
	return <-read
}
