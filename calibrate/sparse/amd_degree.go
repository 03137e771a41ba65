package sparse

// boundDegrees rewrites the list of each variable i in the pivot's list Lp, and finds
// the part of its degree that lies outside Lp: with Ai its entries and Ei its elements,
// at most
//
//	min(the degree before, |Ai \ Lp| + sum over e in Ei of |Le \ Lp|)   [ADD, eq. 4]
//
// A variable left with nothing outside Lp goes with the pivot (mass elimination, [GL]).
func (q *quotient) boundDegrees(p int32) {
	q.countOutside(p)
	for _, i := range q.list(p) {
		d, hash := q.rewrite(i, p)
		if d == 0 {
			w := -q.weight[i]
			q.left -= w
			q.degree[p] -= w
			q.joinTo(p, i)
			continue
		}
		q.degree[i] = min(q.degree[i], d)
		h := int32(hash % uint32(len(q.bucket)))
		q.hash[i] = h
		q.sibling[i] = q.bucket[h]
		q.bucket[h] = i
	}
}

// countOutside leaves |Le \ Lp| in mark[e] - stamp for every element e that touches Lp:
// each starts from |Le| when first met, and every variable of Lp in it takes its weight
// off [ADD, Algorithm 2].
func (q *quotient) countOutside(p int32) {
	q.stamp += q.widest + 1 // above every mark there is
	for _, i := range q.list(p) {
		w := int64(-q.weight[i])
		for _, e := range q.list(i)[:q.elems[i]] {
			if q.state[e] == gone {
				continue
			}
			if q.mark[e] < q.stamp {
				q.mark[e] = q.stamp + int64(q.degree[e])
			}
			q.mark[e] -= w
		}
	}
}

// rewrite drops from variable i's list the elements that p absorbed and the variables
// that p's list covers, and adds p. It returns the degree outside p's list and a hash of
// the new list.
func (q *quotient) rewrite(i, p int32) (outside int32, hash uint32) {
	list := q.list(i)
	kept := 0
	for _, e := range list[:q.elems[i]] {
		if q.state[e] == gone {
			continue
		}
		out := int32(q.mark[e] - q.stamp)
		if out == 0 {
			// All of it lies in p's list: aggressive absorption [ADD, 4.2].
			q.drop(e)
			continue
		}
		list[kept] = e
		kept++
		outside += out
		hash += uint32(e)
	}
	elems := kept
	for _, j := range list[q.elems[i]:] {
		w := q.weight[j]
		if w <= 0 {
			continue
		}
		list[kept] = j
		kept++
		outside += w
		hash += uint32(j)
	}
	// What tied i to p, the variable p or an element now gone, has left a place.
	if elems < kept {
		list[kept] = list[elems]
	}
	list[elems] = p
	q.elems[i], q.length[i] = int32(elems+1), int32(kept+1)
	return outside, hash
}

// joinAlike joins variables of p's list that have the same elements and entries: they
// would be eliminated one after another without further fill [GL, 4.3]. Only those with
// equal hash are compared.
func (q *quotient) joinAlike(p int32) {
	q.stamp += q.widest + 1
	for _, i := range q.list(p) {
		if q.weight[i] == 0 {
			continue // joined already
		}
		chain := q.bucket[q.hash[i]]
		q.bucket[q.hash[i]] = none
		for ; chain != none && q.sibling[chain] != none; chain = q.sibling[chain] {
			q.stamp++
			for _, j := range q.list(chain) {
				q.mark[j] = q.stamp
			}
			before := chain
			for j := q.sibling[chain]; j != none; j = q.sibling[j] {
				if !q.alike(chain, j) {
					before = j
					continue
				}
				q.weight[chain] += q.weight[j]
				q.joinTo(chain, j)
				q.sibling[before] = q.sibling[j]
			}
		}
	}
}

// alike reports whether j's list is that of i, whose entries carry the stamp.
func (q *quotient) alike(i, j int32) bool {
	if q.length[i] != q.length[j] || q.elems[i] != q.elems[j] {
		return false
	}
	for _, k := range q.list(j) {
		if q.mark[k] != q.stamp {
			return false
		}
	}
	return true
}
