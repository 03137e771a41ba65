// Package csvfile reads a survey folder: every table, converted to SI at the
// door, with all that is wrong with it said at once.
//
// # How a file is read
//
//	bytes -> text (decode.go) -> rows with their true lines (quotes.go, split.go)
//	      -> heading found by its words, columns and their units (heading.go)
//	      -> the file's decimal mark, from all of its rows (decimal.go)
//	      -> typed rows of strings, through gocsv (sheet.go)
//	      -> the survey's nouns, cell by cell (row.go and a file for each kind of table)
//
// Nothing is guessed. A cell that can be understood in two ways is a problem, and
// so is a quantity without a unit. An empty cell means "not stated"; it becomes a
// Maybe that is not OK or the default the file format names, and never a zero.
//
// gocsv is given a header of this package's own making and rows that were checked
// before; its row types hold strings only, so none of its own conversions takes
// part. (On its own it reads an empty cell as 0, "1,234" as 1.234, a missing or
// differently written column as 0, and counts records instead of lines.)
//
// # What becomes of a bad row
//
// In readings a cell that is no number (n/a, HI, a date) sets its row aside and the
// rest goes on; a missing unit or an unknown kind there, and any fault in the other
// tables, is Fatal, since nothing sound can be computed around it. A remark that
// begins with "!" sets a reading aside by the crew's own wish; it is listed among
// the problems as set aside, so that for every file
//
//	rows = rows used + rows that a SetAside or Fatal problem names
//
// holds. Faults of a heading are told once, at the heading, and not at each row.
//
// Rows that could not be used stay in the Survey so that names in other tables still
// lead somewhere: a reading with SetAside filled, other rows with NaN where the
// number could not be read (and only together with a Fatal problem). A Survey that
// comes with a Fatal problem is good for finding further faults and nothing else.
//
// The same row of readings with the same stated time in two files is an overlapping
// download: the second is set aside. Within one file it is kept, with a notice.
// Rows that state no time are repeats.
package csvfile
