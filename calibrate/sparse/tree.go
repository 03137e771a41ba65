package sparse

// References
//
//	[D]  T. A. Davis, Direct Methods for Sparse Linear Systems, SIAM 2006, chapter 4.
//	[L]  J. W. H. Liu, The role of elimination trees in sparse factorization, SIAM J.
//	     Matrix Anal. Appl. 11 (1990) 134-172.

// eliminationTree is the parent of each pivot, the first row below the diagonal of its
// column of L, or none at a root [L, 2; D, 4.1]. Shortcuts towards the root keep it near
// linear in the entries of A.
func eliminationTree(ptr []int, adj, order, pivot []int32) []int32 {
	n := len(order)
	parent, ancestor := filled(n, none), filled(n, none)
	for k := range int32(n) {
		row := order[k]
		for _, j := range adj[ptr[row]:ptr[row+1]] {
			for i := pivot[j]; i != none && i < k; {
				next := ancestor[i]
				ancestor[i] = k
				if next == none {
					parent[i] = k
				}
				i = next
			}
		}
	}
	return parent
}

// postorder numbers every subtree without a gap, children before their parent in
// ascending order [D, 4.3]: the same fill, and columns that meet lie close together.
func postorder(parent []int32) []int32 {
	n := len(parent)
	child, sibling := filled(n, none), filled(n, none)
	roots := int32(none)
	for k := int32(n) - 1; k >= 0; k-- {
		first := &roots
		if p := parent[k]; p != none {
			first = &child[p]
		}
		sibling[k], *first = *first, k
	}
	sequence := make([]int32, 0, n)
	var stack []int32
	for root := roots; root != none; root = sibling[root] {
		stack = append(stack, root)
		for len(stack) > 0 {
			k := stack[len(stack)-1]
			if c := child[k]; c != none {
				child[k] = sibling[c]
				stack = append(stack, c)
				continue
			}
			stack = stack[:len(stack)-1]
			sequence = append(sequence, k)
		}
	}
	return sequence
}

// analyse finds the pattern of L. Row k holds the pivots on the paths of the elimination
// tree from the entries of column k of A towards k [D, theorem 4.1].
func (p *Plan) analyse() {
	n := p.n
	parent, seen, count := filled(n, none), filled(n, none), make([]int, n)
	for k := range int32(n) {
		seen[k] = k
		for _, i := range p.upper(k) {
			for ; seen[i] != k; i = parent[i] {
				if parent[i] == none {
					parent[i] = k
				}
				seen[i] = k
				count[i]++
			}
		}
	}
	p.lPtr, p.rPtr = make([]int, n+1), make([]int, n+1)
	for k, c := range count {
		p.lPtr[k+1] = p.lPtr[k] + c
	}

	p.lRow = make([]int32, p.lPtr[n])
	next := count
	copy(next, p.lPtr)
	for i := range seen {
		seen[i] = none
	}
	for k := range int32(n) {
		seen[k] = k
		for _, i := range p.upper(k) {
			for ; seen[i] != k; i = parent[i] {
				seen[i] = k
				p.lRow[next[i]] = k
				next[i]++
				p.rPtr[k+1]++
			}
		}
	}

	// Taking the columns in turn puts each row in ascending order, which is an order the
	// elimination may follow: a pivot's parent in the tree is always higher.
	for k := range n {
		p.rPtr[k+1] += p.rPtr[k]
	}
	p.lCol = make([]int32, len(p.lRow))
	copy(next, p.rPtr)
	for i := range int32(n) {
		for _, k := range p.column(i) {
			p.lCol[next[k]] = i
			next[k]++
		}
	}
}

// upper are the rows above the diagonal in column k of P A P'.
func (p *Plan) upper(k int32) []int32 {
	return p.upRow[p.upPtr[k]-p.n : p.upPtr[k+1]-p.n]
}

// column are the rows below the diagonal in column k of L.
func (p *Plan) column(k int32) []int32 { return p.lRow[p.lPtr[k]:p.lPtr[k+1]] }
