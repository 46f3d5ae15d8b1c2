// Package working turns all results of one paper into workings: it picks the
// method or withholds the SD and says why, carries the rounding of the printed
// digits through, raises flags and rates the reading.
//
// It imports extract/result (and, for zones and places, extract/paper) and
// convert. It knows no reader, no PDF engine, no ledger and no screen.
//
// [Work] is the entry. What is converted and what is withheld stands in one table
// (policy.go), the conditions under which the interval of a mean leads to no SD in
// another (obstacles, same file), every flag with its meaning and its effect on the
// rating in a third (flags.go). compare.go holds results against each other,
// context.go asks whether their words tell them apart.
//
// How the ratings do, measured on 20 labelled papers (6 PDFs; 14 articles as XML,
// as printed PDF and as text), share of results wholly right: clear 0.97, 0.99,
// 0.99, 0.98; look 0.92, 0.87, 0.87, 0.82; doubtful 0.12, 0.29, 0.29, 0.29. Of all
// results 52% are clear. A flag's effect is the cause of an error seen there: what
// a result is about (arm, time, outcome) is misread far more often than a number.
package working
