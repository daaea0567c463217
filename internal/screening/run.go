package screening

import (
	"cmp"
	"context"
	"fmt"
	"iter"
	"runtime"
	"sync"
	"sync/atomic"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// DefaultChunkRows is how many candidates are in memory at once where Options
// say nothing: enough that neighbours among them share blocks of rasters.
const DefaultChunkRows = 4096

// Options say how a run goes. They have no influence on what it finds.
type Options struct {
	Workers   int // 0 or less is GOMAXPROCS
	ChunkRows int // 0 or less is DefaultChunkRows
	// After is the last summary that the sink of an earlier run committed. That
	// many rows are passed over, and its counts go on.
	After Summary
	// Progress is kept up to date; nil is nobody's.
	Progress *Progress
}

// withDefaults fills in what was left open.
func (o Options) withDefaults() Options {
	if o.Workers <= 0 {
		o.Workers = runtime.GOMAXPROCS(0)
	}
	if o.ChunkRows <= 0 {
		o.ChunkRows = DefaultChunkRows
	}
	if o.Progress == nil {
		o.Progress = new(Progress)
	}
	return o
}

// Progress is how far a run has come. Its zero value is ready; it is safe for
// concurrent use.
type Progress struct {
	// Read and Done count rows that were read and that have a result, those
	// passed over included.
	Read, Done atomic.Int64
	// Pairs counts the pairs of a candidate and a site that this run judged.
	Pairs atomic.Int64
}

// Sink takes what a run finds, from one goroutine. An error ends the run.
type Sink interface {
	// Put takes the next result, in the order of the rows. It may keep it.
	Put(r *Result) error
	// Commit follows the results of each chunk, with the counts up to there. A
	// run that is given them as Options.After goes on behind that chunk.
	Commit(s Summary) error
}

// Run screens the rows for the plan, with links judged by the service, and
// returns the counts up to the last chunk that the sink committed.
//
// The error is the plan's, an *assess.InvalidError; that of rows or of the sink;
// ctx's cause; or an *assess.InvalidError that holds for all pairs, such as a
// raster that is not loaded. What was read before rows failed is still judged.
// Everything else that goes wrong is in the results.
func Run(ctx context.Context, service *assess.Service, plan Plan, rows iter.Seq2[intake.Row, error], how Options, sink Sink) (Summary, error) {
	return run(ctx, func() judge { return service.NewWorker() }, plan, rows, how, sink)
}

func run(ctx context.Context, newJudge func() judge, plan Plan, rows iter.Seq2[intake.Row, error], how Options, sink Sink) (Summary, error) {
	if err := plan.Validate(); err != nil {
		return how.After, err
	}
	how, plan = how.withDefaults(), plan.withDefaults()
	r := runner{sink: sink, summary: how.After, progress: how.Progress, chunk: make([]intake.Row, 0, how.ChunkRows)}
	reach := newReach(plan.stations())
	for range how.Workers {
		r.workers = append(r.workers, worker{judge: newJudge(), reach: reach, mastLimitM: *plan.MastLimitM, progress: how.Progress})
	}
	err := r.all(ctx, rows)
	return r.summary, err
}

// runner is one run under way.
type runner struct {
	workers  []worker
	sink     Sink
	progress *Progress
	summary  Summary // as committed
	chunk    []intake.Row
	results  []Result
}

// all reads the rows, chunk by chunk.
func (r *runner) all(ctx context.Context, rows iter.Seq2[intake.Row, error]) error {
	passOver := r.summary.Rows
	for row, err := range rows {
		if err != nil {
			return cmp.Or(r.flush(ctx), err)
		}
		if err := context.Cause(ctx); err != nil {
			return err
		}
		r.progress.Read.Add(1)
		if passOver > 0 {
			passOver--
			r.progress.Done.Add(1)
			continue
		}
		r.chunk = append(r.chunk, row)
		if len(r.chunk) < cap(r.chunk) {
			continue
		}
		if err := r.flush(ctx); err != nil {
			return err
		}
	}
	if passOver > 0 {
		return fmt.Errorf("the list has %d rows; %d were screened already", r.summary.Rows-passOver, r.summary.Rows)
	}
	return r.flush(ctx)
}

// flush judges the chunk and hands it on.
func (r *runner) flush(ctx context.Context) error {
	if len(r.chunk) == 0 {
		return nil
	}
	if err := r.judge(ctx); err != nil {
		return err
	}
	next := r.summary
	for i := range r.results {
		next.add(&r.results[i])
		if err := r.sink.Put(&r.results[i]); err != nil {
			return fmt.Errorf("keeping the result of row %d: %w", next.Rows, err)
		}
	}
	if err := r.sink.Commit(next); err != nil {
		return fmt.Errorf("keeping the results up to row %d: %w", next.Rows, err)
	}
	r.summary = next
	r.chunk = r.chunk[:0]
	return nil
}

// batch is how many neighbours a worker takes at a time.
const batch = 8

// judge fills the results of the chunk. Workers take neighbours along the curve.
func (r *runner) judge(ctx context.Context) error {
	ctx, stop := context.WithCancelCause(ctx)
	defer stop(nil)
	r.results = make([]Result, len(r.chunk)) // a sink may keep the old ones
	order := alongCurve(r.chunk)
	var next atomic.Int64
	var group sync.WaitGroup
	for i := range r.workers {
		w := &r.workers[i]
		group.Go(func() {
			for {
				end := int(next.Add(batch))
				begin := end - batch
				if begin >= len(order) || ctx.Err() != nil {
					return
				}
				for _, at := range order[begin:min(end, len(order))] {
					if err := w.candidate(ctx, &r.chunk[at], &r.results[at]); err != nil {
						stop(err)
						return
					}
					r.progress.Done.Add(1)
				}
			}
		})
	}
	group.Wait()
	return context.Cause(ctx)
}
