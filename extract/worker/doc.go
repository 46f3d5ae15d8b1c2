// Package worker runs one job at a time in processes that the program starts
// from itself and kills when they overrun: a goroutine that spins in a library
// cannot be stopped, a process can. It moves bytes; what a job means is its
// caller's business.
package worker
