// Package jats reads article XML (NISO Z39.96, JATS) into the model. It knows
// nothing of results.
package jats
