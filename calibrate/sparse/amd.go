package sparse

import (
	"cmp"
	"math"
	"slices"
)

// References
//
//	[ADD]  P. R. Amestoy, T. A. Davis, I. S. Duff, An approximate minimum degree ordering
//	       algorithm, SIAM J. Matrix Anal. Appl. 17 (1996) 886-905.
//	[ADD4] The same, Algorithm 837, ACM TOMS 30 (2004) 381-388: rows left to the end.
//	[GL]   A. George, J. W. H. Liu, The evolution of the minimum degree ordering
//	       algorithm, SIAM Review 31 (1989) 1-19: quotient graph, mass elimination,
//	       indistinguishable variables.

// Of a node of the quotient graph.
type state uint8

const (
	variable state = iota // not yet eliminated, stands for itself and what joined it
	element               // eliminated; its list is the clique it left behind
	gone                  // joined to a variable, absorbed by an element, or dense
)

// quotient is the quotient graph of the matrix part-way through elimination [GL, 4]. A
// variable's list holds first the elements it lies in, then the variables it still has
// an entry with; an element's list holds variables. Two variables are adjacent in the
// elimination graph when they share an element or an entry, so no fill is ever stored.
type quotient struct {
	arena                 []int32 // all lists
	free                  int     // where the next list goes
	start                 []int   // list of each node
	length, elems         []int32 // its length, and how many elements lead it
	state                 []state
	weight                []int32 // variables it stands for; negative while in the pivot's list
	degree                []int32 // variable: bound on the external degree; element: weight of its list
	left                  int32   // weight of what is not yet eliminated
	mark                  []int64 // of a node, against stamp; never reset
	stamp                 int64
	widest                int64 // largest degree of an element so far
	head, next, prev      []int32
	least                 int
	bucket, hash, sibling []int32 // variables of the pivot's list by hash
	follower, last        []int32 // chain of what joined a variable
	order                 []int32
}

// none ends a list.
const none = -1

// amd orders a symmetric pattern for elimination by approximate minimum degree [ADD].
// The neighbours of i are adj[ptr[i]:ptr[i+1]], without i itself and without duplicates;
// every pair stands at both ends. Ties go to the variable whose degree was found last,
// among those untouched to the lowest index, so the order depends on the pattern alone.
func amd(ptr []int, adj []int32) []int32 {
	q := newQuotient(ptr, adj)
	late := q.setDenseAside(ptr)
	q.fileAll(ptr, adj)
	for q.left > 0 {
		p := q.leastDegree()
		q.eliminate(p)
		q.boundDegrees(p)
		q.joinAlike(p)
		q.file(p)
		for i := p; i != none; i = q.follower[i] {
			q.order = append(q.order, i)
		}
	}
	return append(q.order, late...)
}

func newQuotient(ptr []int, adj []int32) *quotient {
	n := len(ptr) - 1
	ints := func() []int32 { return make([]int32, n) }
	return &quotient{
		// A new element needs at most the room of the lists it replaces, so twice the
		// graph seldom fills up.
		arena: make([]int32, 2*len(adj)+n),
		start: make([]int, n), length: ints(), elems: ints(), state: make([]state, n),
		weight: ints(), degree: ints(), left: int32(n), mark: make([]int64, n), stamp: 1,
		head: filled(n+1, none), next: ints(), prev: ints(),
		bucket: filled(n, none), hash: ints(), sibling: ints(),
		follower: filled(n, none), last: ints(), order: make([]int32, 0, n),
	}
}

func filled(n int, v int32) []int32 {
	s := make([]int32, n)
	for i := range s {
		s[i] = v
	}
	return s
}

// setDenseAside takes rows with more than max(16, 10 sqrt n) neighbours out of the graph
// [ADD4]: they would be in nearly every list, and they end up last anyhow. It returns
// them by degree, then index.
func (q *quotient) setDenseAside(ptr []int) []int32 {
	n := len(q.state)
	limit := max(16, int(10*math.Sqrt(float64(n))))
	var late []int32
	for i := range n {
		if ptr[i+1]-ptr[i] > limit {
			q.state[i] = gone
			late = append(late, int32(i))
		}
	}
	slices.SortStableFunc(late, func(a, b int32) int {
		return cmp.Compare(ptr[a+1]-ptr[a], ptr[b+1]-ptr[b])
	})
	q.left -= int32(len(late))
	return late
}

// fileAll lays out the lists of what is not dense and files each variable by its degree.
func (q *quotient) fileAll(ptr []int, adj []int32) {
	// Backwards, so that the lowest index heads its list.
	for i := len(q.state) - 1; i >= 0; i-- {
		q.last[i] = int32(i)
		q.start[i] = q.free
		if q.state[i] == gone {
			continue
		}
		for _, j := range adj[ptr[i]:ptr[i+1]] {
			if q.state[j] != gone {
				q.arena[q.free] = j
				q.free++
			}
		}
		q.length[i] = int32(q.free - q.start[i])
		q.weight[i] = 1
		q.degree[i] = q.length[i]
		q.link(int32(i))
	}
}

// link files variable i under its degree.
func (q *quotient) link(i int32) {
	d := q.degree[i]
	h := q.head[d]
	q.prev[i], q.next[i] = none, h
	if h != none {
		q.prev[h] = i
	}
	q.head[d] = i
	q.least = min(q.least, int(d))
}

func (q *quotient) unlink(i int32) {
	a, b := q.prev[i], q.next[i]
	if a != none {
		q.next[a] = b
	} else {
		q.head[q.degree[i]] = b
	}
	if b != none {
		q.prev[b] = a
	}
}

// leastDegree takes out the next pivot.
func (q *quotient) leastDegree() int32 {
	for q.head[q.least] == none {
		q.least++
	}
	p := q.head[q.least]
	q.unlink(p)
	return p
}

func (q *quotient) list(i int32) []int32 {
	a := q.start[i]
	return q.arena[a : a+int(q.length[i])]
}
