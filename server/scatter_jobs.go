package main

import (
	"context"
	"errors"
	"fmt"
	"sync"
	"sync/atomic"

	"lanternbook/calc"
)

const (
	mostRunning = 2  // draws at once: each keeps one core busy
	mostKept    = 16 // builds whose last draw is remembered
)

// errBusy says that as many draws run as may.
var errBusy = errors.New("two draws are running already: wait for one, or stop it")

// scatterJobs are the draws of many builds that run or have run since the
// program was started: the last of each build. They live in memory alone.
type scatterJobs struct {
	ctx   context.Context //nolint:containedctx // the jobs outlive the requests that start them
	end   context.CancelFunc
	group sync.WaitGroup

	mu    sync.Mutex
	jobs  map[int64]*scatterJob // by build
	order []int64               // builds, the last started at the end
}

// scatterJob is one draw. What is not atomic is written once, before ended is
// closed.
type scatterJob struct {
	of       calc.Build
	revision int64
	samples  int
	seed     uint64
	done     atomic.Int64
	cancel   context.CancelFunc
	ended    chan struct{}
	result   calc.ScatterResult
	err      error
}

func newScatterJobs() *scatterJobs {
	ctx, end := context.WithCancel(context.Background())
	return &scatterJobs{ctx: ctx, end: end, jobs: map[int64]*scatterJob{}}
}

// job is the last draw of a build; nil when there was none.
func (j *scatterJobs) job(build int64) *scatterJob {
	j.mu.Lock()
	defer j.mu.Unlock()
	return j.jobs[build]
}

// start draws a build anew; a draw of it that still runs is stopped. It returns
// errBusy when too many others run.
func (j *scatterJobs) start(build int64, job *scatterJob) error {
	j.mu.Lock()
	defer j.mu.Unlock()
	running := 0
	for id, other := range j.jobs {
		if id != build && other.running() {
			running++
		}
	}
	if running >= mostRunning {
		return errBusy
	}
	if before := j.jobs[build]; before != nil {
		before.cancel()
	}
	j.remember(build)
	ctx, cancel := context.WithCancel(j.ctx)
	job.cancel, job.ended = cancel, make(chan struct{})
	j.jobs[build] = job
	j.group.Go(func() {
		defer cancel()
		job.run(ctx)
	})
	return nil
}

// remember makes room for one more build's draw: the oldest that has ended
// goes.
func (j *scatterJobs) remember(build int64) {
	kept := j.order[:0]
	for _, id := range j.order {
		switch {
		case id == build:
		case len(j.order) > mostKept && len(kept) == 0 && !j.jobs[id].running():
			delete(j.jobs, id)
		default:
			kept = append(kept, id)
		}
	}
	j.order = append(kept, build)
}

// stop ends the draw of a build, if one runs.
func (j *scatterJobs) stop(build int64) {
	if job := j.job(build); job != nil {
		job.cancel()
		<-job.ended
	}
}

// close stops all draws and waits for them.
func (j *scatterJobs) close() {
	j.end()
	j.group.Wait()
}

func (j *scatterJob) run(ctx context.Context) {
	defer close(j.ended)
	defer func() {
		if fault := recover(); fault != nil { // nothing but the draw may go down with it
			j.err = fmt.Errorf("the draw met a fault of its own: %v", fault)
		}
	}()
	j.result, j.err = calc.Scatter(j.of, j.samples, j.seed, func(done int) bool {
		j.done.Store(int64(done))
		return ctx.Err() == nil
	})
}

// running tells whether the draw has not ended.
func (j *scatterJob) running() bool {
	select {
	case <-j.ended:
		return false
	default:
		return true
	}
}
