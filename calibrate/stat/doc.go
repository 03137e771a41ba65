// Package stat holds the statistics of gross errors: which of many readings or causes
// stands out, how sure one may be after looking at all of them, and what cannot be
// told apart. It works on whitened or weighted linear problems and knows nothing of
// where they come from.
package stat
