package hydraulic

import "math"

// canFlow reports whether any flows exist that balance every junction and respect the
// one-way links: a maximum flow from what supplies to what takes, by augmenting paths.
func (w *works) canFlow() bool {
	n := len(w.points)
	source, sink, ground := n, n+1, n+2
	c := make([][]float64, n+3)
	for i := range c {
		c[i] = make([]float64, n+3)
	}
	const plenty = 1e6
	for i, l := range w.links {
		way, both := w.way(i)
		if w.shut(i) || (way == 0 && !both) {
			continue
		}
		if way >= 0 {
			c[l.From][l.To] += plenty
		}
		if way <= 0 {
			c[l.To][l.From] += plenty
		}
	}
	net, need := 0.0, 0.0
	for i, p := range w.points {
		switch d := w.c.DrawOff[i]; {
		case p.Kind == Fixed:
			c[ground][i], c[i][ground] = plenty, plenty
		case p.Kind == Outlet:
			c[i][ground] = plenty
		case d > 0:
			c[i][sink], net, need = d, net+d, need+d
		case d < 0:
			c[source][i], net = -d, net+d
		}
	}
	// Reservoirs and outlets make up the difference.
	if net > 0 {
		c[source][ground] = net
	} else {
		c[ground][sink], need = -net, need-net
	}
	return maxFlow(c, source, sink) > need*(1-1e-9)-1e-15
}

func maxFlow(c [][]float64, source, sink int) float64 {
	total := 0.0
	for {
		from := make([]int, len(c))
		for i := range from {
			from[i] = -1
		}
		from[source] = source
		queue := []int{source}
		for len(queue) > 0 && from[sink] < 0 {
			i := queue[0]
			queue = queue[1:]
			for j, room := range c[i] {
				if room > 1e-15 && from[j] < 0 {
					from[j] = i
					queue = append(queue, j)
				}
			}
		}
		if from[sink] < 0 {
			return total
		}
		least := math.Inf(1)
		for j := sink; j != source; j = from[j] {
			least = math.Min(least, c[from[j]][j])
		}
		for j := sink; j != source; j = from[j] {
			c[from[j]][j] -= least
			c[j][from[j]] += least
		}
		total += least
	}
}
