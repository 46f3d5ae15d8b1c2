// Package convert is the statistics of halfspan: from what papers print (an
// interval, a standard error, a test, quartiles) to mean, SD, SE and n by
// published methods. Numbers in, numbers out.
//
// It imports nothing of the project, opens no file, keeps no state, never
// panics and never returns NaN: impossible input gives an error.
package convert
