// Package scale reads the limits of the scales on which outcomes are scored
// ("range 0 to 63", "VAS, 0–100 mm") and which outcomes are counted in whole
// numbers. The working strikes out with them what no values can have; a limit read
// wrongly would strike out the truth, so what is not plainly a scale is left.
//
// Start with [Set]. It imports the paper's model and the results only.
package scale
