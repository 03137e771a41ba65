// Package sparse factorises sparse symmetric positive definite matrices,
//
//	P A P' = L D L'
//
// with P a permutation that keeps L sparse, L unit lower triangular and D diagonal and
// positive. It knows nothing of pipes; the steady model and the estimate use it for the
// heads of a network, where the pattern of A stays and its values change with every step.
//
// The pattern is analysed once, by NewPlan: approximate minimum degree order, elimination
// tree, pattern of L. A Plan may be shared by goroutines. Each takes a Factor of its own
// from it, and then calls Factorize for each set of values, Solve for each right side, and
// where wanted Condition, LogDet, InverseDiagonal and InverseEntry. All vectors are in the
// caller's numbering. Everything is deterministic: the same pattern and values give the
// same bits on every run of one machine.
//
// Bad values (not positive definite, NaN) are an error, *NotPositive. A slice of the
// wrong length, or a question to a Factor whose last Factorize failed, is the caller's
// mistake and panics.
//
// # What it costs
//
// Measured with
//
//	go test -run xx -bench . -count 3 ./calibrate/sparse
//
// on one core of a shared 2-core amd64 server (Intel Xeon, go 1.26), in ms. A grid has
// four neighbours a point, the worst that lies flat; pipes are a spanning tree and 40 %
// of the other pairs, like a pipe network. Both are numbered at random.
//
//	                  entries of L   NewPlan   Factorize   Solve   InverseDiagonal
//	pipes    1,024         3,674       0.47       0.029    0.008        0.053
//	pipes   10,000        46,905       4.5        0.71     0.17         1.2
//	pipes   99,856       630,320        74       14.7      2.2          37
//	grid     1,024        11,498       0.69       0.15     0.019        0.31
//	grid    10,000       204,652       7.4        5.4      0.34         14
//	grid    99,856     3,283,584       133         210     6.2          660
//
// The columns are eliminated one by one, not in blocks. Where L has large dense parts, as
// on grids beyond some 100,000 points or with a thousand unknowns that all rounds share, a
// block method is faster; on pipe networks the blocks would be too small.
package sparse
