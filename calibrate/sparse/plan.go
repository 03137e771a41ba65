package sparse

import (
	"fmt"
	"math"
	"slices"
)

// Plan is the analysed pattern of a symmetric matrix A of n rows: the order P in which
// it is eliminated and the pattern of L in P A P' = L D L'. It is read-only once made
// and may be shared by goroutines, each with a Factor of its own.
type Plan struct {
	n     int
	order []int32 // order[k] is the caller's row of pivot k
	pivot []int32 // pivot[i] is the pivot of the caller's row i
	place []int   // of the caller's entry e among the values; duplicates share a place

	// P A P': value k < n is the diagonal of pivot k, the others are the upper triangle
	// by columns, value upPtr[k] <= q < upPtr[k+1] in row upRow[q-n] of column k.
	upPtr []int
	upRow []int32

	// L without its unit diagonal: lRow by columns, and lCol by rows; both ascend.
	lPtr, rPtr []int
	lRow, lCol []int32
}

// NewPlan analyses the pattern in which the caller's entry e is A[rows[e], cols[e]] of an
// n by n symmetric matrix. An off-diagonal entry is given once, in either triangle, and
// stands for both; entries at the same place, in whichever triangle, are summed. The error tells how
// many entries lie outside the matrix, and the first.
func NewPlan(n int, rows, cols []int) (*Plan, error) {
	if err := check(n, rows, cols); err != nil {
		return nil, err
	}
	ptr, adj := neighbours(n, rows, cols)
	order := amd(ptr, adj)
	pivot := inverse(order)
	parent := eliminationTree(ptr, adj, order, pivot)
	order = permuted(order, postorder(parent))

	p := &Plan{n: n, order: order, pivot: inverse(order)}
	p.layOut(rows, cols)
	p.analyse()
	return p, nil
}

// N is the number of rows.
func (p *Plan) N() int { return p.n }

// FillIn is the number of entries of L below its diagonal, those of A included.
func (p *Plan) FillIn() int { return len(p.lRow) }

// check reports what no matrix has.
func check(n int, rows, cols []int) error {
	if n < 0 || n >= math.MaxInt32 {
		return fmt.Errorf("sparse: a matrix of %d rows; from 0 to %d can be factorised", n, math.MaxInt32-1)
	}
	if len(rows) != len(cols) {
		return fmt.Errorf("sparse: %d row numbers but %d column numbers", len(rows), len(cols))
	}
	if len(rows) > math.MaxInt32 {
		return fmt.Errorf("sparse: %d entries; up to %d can be analysed", len(rows), math.MaxInt32)
	}
	bad, e := 0, 0
	for i := len(rows) - 1; i >= 0; i-- {
		if r, c := rows[i], cols[i]; r < 0 || r >= n || c < 0 || c >= n {
			bad, e = bad+1, i
		}
	}
	if bad == 0 {
		return nil
	}
	return fmt.Errorf("sparse: %d entries lie outside the %d by %d matrix, the first of them entry %d at (%d, %d)",
		bad, n, n, e, rows[e], cols[e])
}

// neighbours are the off-diagonal places of each row, ascending and without duplicates.
func neighbours(n int, rows, cols []int) (ptr []int, adj []int32) {
	ptr = make([]int, n+1)
	for e, r := range rows {
		if c := cols[e]; r != c {
			ptr[r+1]++
			ptr[c+1]++
		}
	}
	for i := range n {
		ptr[i+1] += ptr[i]
	}
	adj = make([]int32, ptr[n])
	next := slices.Clone(ptr[:n])
	for e, r := range rows {
		if c := cols[e]; r != c {
			adj[next[r]], adj[next[c]] = int32(c), int32(r)
			next[r]++
			next[c]++
		}
	}
	kept := 0
	for i := range n {
		list := adj[ptr[i]:ptr[i+1]]
		slices.Sort(list)
		ptr[i] = kept
		kept += copy(adj[kept:], slices.Compact(list))
	}
	ptr[n] = kept
	return ptr, adj[:kept]
}

// layOut gives each entry its place in P A P'.
func (p *Plan) layOut(rows, cols []int) {
	n := p.n
	at := func(e int) (row, col int32) {
		i, j := p.pivot[rows[e]], p.pivot[cols[e]]
		return min(i, j), max(i, j)
	}
	p.place = make([]int, len(rows))
	start := make([]int, n+1) // of each column's entries, duplicates apart
	for e := range rows {
		i, j := at(e)
		if i == j {
			p.place[e] = int(i)
			continue
		}
		start[j+1]++
	}
	for k := range n {
		start[k+1] += start[k]
	}
	entries, next := make([]int, start[n]), slices.Clone(start[:n])
	for e := range rows {
		if i, j := at(e); i != j {
			entries[next[j]] = e
			next[j]++
		}
	}

	p.upPtr = make([]int, n+1)
	p.upPtr[0] = n
	p.upRow = make([]int32, 0, len(entries))
	latest := filled(n, none) // where each row was last put in upRow
	for k := range n {
		first := int32(len(p.upRow))
		for _, e := range entries[start[k]:start[k+1]] {
			i, _ := at(e)
			if latest[i] < first {
				latest[i] = int32(len(p.upRow))
				p.upRow = append(p.upRow, i)
			}
			p.place[e] = n + int(latest[i])
		}
		p.upPtr[k+1] = n + len(p.upRow)
	}
}

func inverse(order []int32) []int32 {
	inv := make([]int32, len(order))
	for k, i := range order {
		inv[i] = int32(k)
	}
	return inv
}

// permuted is order taken in a new sequence.
func permuted(order, sequence []int32) []int32 {
	out := make([]int32, len(order))
	for k, s := range sequence {
		out[k] = order[s]
	}
	return out
}
