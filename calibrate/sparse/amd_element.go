package sparse

// eliminate turns variable p into an element: its list becomes the union of its entries
// and of the elements it lay in, which it absorbs [ADD, 2.2].
func (q *quotient) eliminate(p int32) {
	list := q.list(p)
	need := len(list)
	for _, e := range list[:q.elems[p]] {
		need += int(q.length[e])
	}
	q.makeRoom(need)

	list = q.list(p) // may have moved
	q.left -= q.weight[p]
	q.weight[p] = -q.weight[p] // keeps p out of its own list
	q.degree[p] = 0
	begin := q.free
	for _, e := range list[:q.elems[p]] {
		q.gather(p, q.list(e))
		q.drop(e)
	}
	q.gather(p, list[q.elems[p]:])
	q.state[p], q.elems[p] = element, 0
	q.start[p], q.length[p] = begin, int32(q.free-begin)
}

// gather appends those variables of a list that are not yet in the pivot's.
func (q *quotient) gather(p int32, list []int32) {
	for _, i := range list {
		w := q.weight[i]
		if w <= 0 {
			continue
		}
		q.weight[i] = -w
		q.degree[p] += w
		q.unlink(i)
		q.arena[q.free] = i
		q.free++
	}
}

func (q *quotient) drop(i int32) {
	q.state[i], q.length[i] = gone, 0
}

// makeRoom leaves room for need more entries: by closing the gaps between the lists, and
// only where that does not do by taking more memory.
func (q *quotient) makeRoom(need int) {
	if q.free+need <= len(q.arena) {
		return
	}
	live := 0
	for _, l := range q.length {
		live += int(l)
	}
	// Half as much again keeps the next call far away.
	arena := make([]int32, max(len(q.arena), live+live/2+need))
	q.free = 0
	for i := range q.state {
		list := q.list(int32(i))
		q.start[i] = q.free
		q.free += copy(arena[q.free:], list)
	}
	q.arena = arena
}

// joinTo makes j a follower of i: eliminated with it, at once.
func (q *quotient) joinTo(i, j int32) {
	q.weight[j] = 0
	q.drop(j)
	q.follower[q.last[i]] = j
	q.last[i] = q.last[j]
}

// file gives each variable of the pivot's list its new degree bound, files it, and
// leaves the list without those that joined another.
func (q *quotient) file(p int32) {
	list := q.list(p)
	kept := list[:0]
	for _, i := range list {
		w := -q.weight[i]
		if w == 0 {
			continue
		}
		q.weight[i] = w
		// The first and second bound of [ADD, eq. 4]; the third is in degree already.
		q.degree[i] = min(q.degree[i]+q.degree[p]-w, q.left-w)
		q.link(i)
		kept = append(kept, i)
	}
	q.length[p] = int32(len(kept))
	q.widest = max(q.widest, int64(q.degree[p]))
	if len(kept) == 0 {
		q.drop(p)
	}
}
