// Package sparse factorises sparse symmetric positive definite matrices, A = L D L',
// for the steady model: the pattern is analysed once, the values change with every
// iteration. Written from T. A. Davis, Direct Methods for Sparse Linear Systems (SIAM
// 2006), chapters 4 and 7, and Algorithm 849 (ACM TOMS 31, 2005); the ordering is
// minimum degree (George and Liu, SIAM Review 31, 1989).
package sparse

import (
	"fmt"
	"math"
	"sort"
)

// Plan is the analysed pattern: read-only, shared by goroutines.
type Plan struct {
	n      int
	perm   []int // perm[k] is the original row of pivot k
	inv    []int
	colPtr []int // upper triangle of P A P' by columns
	rowIdx []int
	place  []int // entry of the caller -> position in the values; duplicates share one
	parent []int
	lPtr   []int
	rows   [][2]int // of each caller's entry, original numbering
}

// NewPlan analyses the pattern in which the caller's entry e stands at rows[e],
// cols[e], an off-diagonal pair given once; duplicates are summed.
func NewPlan(n int, rows, cols []int) (*Plan, error) {
	if len(rows) != len(cols) {
		return nil, fmt.Errorf("sparse: %d rows but %d columns", len(rows), len(cols))
	}
	adj := make([]map[int]struct{}, n)
	for i := range adj {
		adj[i] = map[int]struct{}{}
	}
	p := &Plan{n: n}
	for e := range rows {
		r, c := rows[e], cols[e]
		if r < 0 || c < 0 || r >= n || c >= n {
			return nil, fmt.Errorf("sparse: entry %d at (%d, %d) is outside %d by %d", e, r, c, n, n)
		}
		p.rows = append(p.rows, [2]int{r, c})
		if r != c {
			adj[r][c], adj[c][r] = struct{}{}, struct{}{}
		}
	}
	p.perm = minimumDegree(adj)
	p.inv = make([]int, n)
	for k, i := range p.perm {
		p.inv[i] = k
	}
	p.assemble()
	p.analyse()
	return p, nil
}

// minimumDegree eliminates the vertex of least degree first; ties go to the lowest
// index, so that every run orders alike.
func minimumDegree(adj []map[int]struct{}) []int {
	n := len(adj)
	buckets := map[int][]int{}
	degree := make([]int, n)
	done := make([]bool, n)
	least := n
	push := func(i int) {
		degree[i] = len(adj[i])
		buckets[degree[i]] = append(buckets[degree[i]], i)
		least = min(least, degree[i])
	}
	for i := n - 1; i >= 0; i-- {
		push(i)
	}
	order := make([]int, 0, n)
	for len(order) < n {
		for len(buckets[least]) == 0 {
			least++
		}
		b := buckets[least]
		i := b[len(b)-1]
		buckets[least] = b[:len(b)-1]
		if done[i] || degree[i] != least {
			continue
		}
		done[i] = true
		order = append(order, i)
		near := make([]int, 0, len(adj[i]))
		for j := range adj[i] {
			near = append(near, j)
		}
		sort.Sort(sort.Reverse(sort.IntSlice(near)))
		for _, j := range near {
			delete(adj[j], i)
			for _, k := range near {
				if k != j {
					adj[j][k] = struct{}{}
				}
			}
		}
		for _, j := range near {
			push(j)
		}
		adj[i] = nil
	}
	return order
}

// assemble lays the upper triangle of the permuted matrix out by columns.
func (p *Plan) assemble() {
	type pos struct{ c, r int }
	index := map[pos]int{}
	cols := make([][]int, p.n)
	at := make([]pos, len(p.rows))
	for e, rc := range p.rows {
		r, c := p.inv[rc[0]], p.inv[rc[1]]
		if r > c {
			r, c = c, r
		}
		at[e] = pos{c, r}
		if _, ok := index[at[e]]; !ok {
			index[at[e]] = 0
			cols[c] = append(cols[c], r)
		}
	}
	p.colPtr = make([]int, p.n+1)
	for c := range cols {
		sort.Ints(cols[c])
		for _, r := range cols[c] {
			index[pos{c, r}] = len(p.rowIdx)
			p.rowIdx = append(p.rowIdx, r)
		}
		p.colPtr[c+1] = len(p.rowIdx)
	}
	p.place = make([]int, len(at))
	for e := range at {
		p.place[e] = index[at[e]]
	}
}

// analyse finds the elimination tree and the column counts of L in one pass.
func (p *Plan) analyse() {
	p.parent = make([]int, p.n)
	count, flag := make([]int, p.n), make([]int, p.n)
	for k := 0; k < p.n; k++ {
		p.parent[k], flag[k] = -1, k
		for q := p.colPtr[k]; q < p.colPtr[k+1]; q++ {
			for i := p.rowIdx[q]; i < k && flag[i] != k; i = p.parent[i] {
				if p.parent[i] < 0 {
					p.parent[i] = k
				}
				count[i]++
				flag[i] = k
			}
		}
	}
	p.lPtr = make([]int, p.n+1)
	for k := 0; k < p.n; k++ {
		p.lPtr[k+1] = p.lPtr[k] + count[k]
	}
}

// Factor is one goroutine's numeric object.
type Factor struct {
	p           *Plan
	values      []float64
	li          []int
	lx, d       []float64
	y, w, r, dx []float64
	pattern     []int
	flag, nnz   []int
}

// NewFactor makes room for the values and the factor.
func (p *Plan) NewFactor() *Factor {
	n := p.n
	return &Factor{p: p, values: make([]float64, len(p.rowIdx)), li: make([]int, p.lPtr[n]), lx: make([]float64, p.lPtr[n]),
		d: make([]float64, n), y: make([]float64, n), w: make([]float64, n), r: make([]float64, n), dx: make([]float64, n), pattern: make([]int, n), flag: make([]int, n), nnz: make([]int, n)}
}

// NotPositive says at which row of the caller's matrix a pivot was not positive.
type NotPositive struct {
	Row   int
	Pivot float64
}

func (e *NotPositive) Error() string {
	return fmt.Sprintf("sparse: pivot %g at row %d is not positive", e.Pivot, e.Row)
}

// Factorize computes L and D from values laid out as in NewPlan: up-looking, row k of
// L from the tree paths of column k.
func (f *Factor) Factorize(values []float64) error {
	p := f.p
	clear(f.values)
	for e, q := range p.place {
		f.values[q] += values[e]
	}
	clear(f.y)
	for k := 0; k < p.n; k++ {
		top := p.n
		f.flag[k], f.nnz[k] = k, 0
		diag := 0.0
		for q := p.colPtr[k]; q < p.colPtr[k+1]; q++ {
			i := p.rowIdx[q]
			if i == k {
				diag = f.values[q]
				continue
			}
			f.y[i] += f.values[q]
			length := 0
			for ; f.flag[i] != k; i = p.parent[i] {
				f.pattern[length] = i
				length++
				f.flag[i] = k
			}
			for length > 0 {
				top--
				length--
				f.pattern[top] = f.pattern[length]
			}
		}
		d := diag
		for ; top < p.n; top++ {
			i := f.pattern[top]
			yi := f.y[i]
			f.y[i] = 0
			end := p.lPtr[i] + f.nnz[i]
			for q := p.lPtr[i]; q < end; q++ {
				f.y[f.li[q]] -= f.lx[q] * yi
			}
			l := yi / f.d[i]
			d -= l * yi
			f.li[end], f.lx[end] = k, l
			f.nnz[i]++
		}
		if !(d > 1e-14*diag) || math.IsInf(d, 0) {
			return &NotPositive{Row: p.perm[k], Pivot: d}
		}
		f.d[k] = d
	}
	return nil
}

// Solve finds x in A x = b; they may be the same slice.
func (f *Factor) Solve(b, x []float64) {
	p := f.p
	w := f.w
	for k, i := range p.perm {
		w[k] = b[i]
	}
	for k := 0; k < p.n; k++ {
		for q := p.lPtr[k]; q < p.lPtr[k+1]; q++ {
			w[f.li[q]] -= f.lx[q] * w[k]
		}
	}
	for k := p.n - 1; k >= 0; k-- {
		s := w[k] / f.d[k]
		for q := p.lPtr[k]; q < p.lPtr[k+1]; q++ {
			s -= f.lx[q] * w[f.li[q]]
		}
		w[k] = s
	}
	for k, i := range p.perm {
		x[i] = w[k]
	}
}

// SolveRefined solves with one step of iterative refinement and returns the largest
// residual over the largest entry of b.
func (f *Factor) SolveRefined(b, x []float64) float64 {
	r, dx := f.r, f.dx
	f.Solve(b, x)
	f.residual(b, x, r)
	f.Solve(r, dx)
	for i := range x {
		x[i] += dx[i]
	}
	f.residual(b, x, r)
	worst, scale := 0.0, 0.0
	for i := range r {
		worst, scale = math.Max(worst, math.Abs(r[i])), math.Max(scale, math.Abs(b[i]))
	}
	if scale == 0 {
		return worst
	}
	return worst / scale
}

func (f *Factor) residual(b, x, r []float64) {
	p := f.p
	copy(r, b)
	for c := 0; c < p.n; c++ {
		for q := p.colPtr[c]; q < p.colPtr[c+1]; q++ {
			i, j := p.perm[p.rowIdx[q]], p.perm[c]
			r[i] -= f.values[q] * x[j]
			if i != j {
				r[j] -= f.values[q] * x[i]
			}
		}
	}
}
