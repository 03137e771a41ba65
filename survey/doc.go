// Package survey holds the nouns of a pressure survey: what a crew's tables
// say, and what is made of them before any model is fitted.
//
// The line through the house is
//
//	tables -> Survey -> Corrected readings -> Heads -> fit -> findings -> report
//
// This package has the types up to Head, and Finding and the other kinds of
// trouble, which every later stage passes on. The verbs live in subpackages:
// survey/csvfile reads tables, survey/correct applies what is known about a
// gauge, survey/head turns corrected readings into heads, survey/check says
// what can be said before any model.
//
// # Units and signs
//
// Every number in these types is SI: metres, cubic metres a second, pascals,
// kilograms, seconds, degrees Celsius for water temperature (the one
// exception, because every published water formula takes it). Levels and heads
// are metres above the survey's datum. Flow in a pipe is positive from its From
// point to its To point; a draw-off is positive out of the system. What the
// crew wrote is kept beside the converted value.
//
// # Four kinds of trouble
//
// They are never mixed: an error means the work cannot go on; a Problem is a row or
// a cell that could not be used; a Caveat rides on a number that could; a Finding
// is a conclusion about a pipe, a fitting, a tap or a gauge.
//
// The package reads no files, knows no clock, and knows nothing of estimation.
package survey
