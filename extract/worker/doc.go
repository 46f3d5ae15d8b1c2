// Package worker runs jobs in processes that the program starts from itself and
// kills when they overrun: a goroutine that spins in a library cannot be
// stopped and a stack that overflows cannot be recovered, a process can be
// replaced. It moves bytes; what a job means is its caller's business.
//
// A program that uses it calls [Serve] as the first line of main and of
// TestMain: started with the hidden argument it becomes a worker and never
// returns from there, otherwise Serve does nothing. Jobs are handed to a [Pool].
//
// Parent and worker exchange lines of JSON over the worker's standard input and
// output. The worker gives a sign of life as the job goes on; when none comes in
// time, when the job takes too long, when it needs too much memory or dies, the
// process is gone, another takes its place, and the job is run once more with no
// other job beside it before it is reported as failed. The end of its standard
// input ends a worker, so that none outlives its parent.
package worker
