// Package working turns all results of one paper into workings: it picks the
// method or withholds the SD and says why, carries the rounding of the printed
// digits through, raises flags and rates the reading.
//
// It imports extract/result (and, for zones and places, extract/paper) and
// convert. It knows no reader, no PDF engine, no ledger and no screen.
package working
