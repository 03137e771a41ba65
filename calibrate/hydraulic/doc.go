// Package hydraulic is the steady model of a pipe system: heads and flows of a
// round from the works' parameters and the round's conditions, and the exact
// sensitivity of whatever a tap reads to every one of them.
//
// # Equations
//
// On total head H (m above datum) and flow Q (m3/s, positive From to To):
//
//	H_from - H_to = friction(Q) + sum of K V|V|/2g     along a pipe, V in the fitting's bore
//	H_to - H_from = factor * gain(Q, speed)            across a pump; a turbine takes head
//	sum of Q in - sum of Q out = draw-off              at a junction
//
// Total head is common to all pipe ends at a junction; a tap on a wall sees
// h = H - alpha V^2/2g with the V of its own pipe. At a free outlet the piezometric
// head is the elevation, so the total head at the pipe's end is that plus
// alpha V^2/2g of the pipe, or V^2/2g of the jet where a nozzle ends the pipe.
//
// Check valves, machines and outlets pass water one way only: such a link either
// flows with its loss, or stands closed with the head against it.
//
// # Method
//
// Newton's method on heads and flows together with the Schur complement on heads
// [TP]: one sparse symmetric factorisation a step, for the heads of the junctions
// only. It works on corrections, not on heads, so that balances close to rounding
// even where a link loses next to nothing. As losses rise with flow, the solution is
// the minimum of a convex content [C] over the flows that balance; a step that
// overshoots that minimum is shortened to it, which makes the method converge from
// any start. One-way links are first given a stiff, finite loss backwards, which
// keeps the problem convex and shows which of them close; those are then taken out
// and the answer is held against the exact conditions.
//
// A machine whose curve bends the wrong way (a pump that gains with the flow, a
// turbine that takes less) breaks convexity. Its slope enters the steps and the
// sensitivities as it is, by a correction of small rank [W], and the descent finds
// the duty that holds by itself.
//
// # Parts at rest
//
// A part in which nothing can move is put at rest exactly: one head, no flow. A part
// that no open link joins to a reservoir or an outlet has no head. Between one-way links
// that pass nothing the balances leave a head open; see idle for how it is settled.
//
// # Sensitivities
//
// The system of a step is symmetric, so one solve with it for each reading gives the
// derivatives by all parameters at once (adjoint) [G]. They are exact for the links that
// flow; a link at the very point of closing has another derivative on its other side.
//
// # References
//
//	[TP] E. Todini, S. Pilati, A gradient algorithm for the analysis of pipe networks,
//	     in Computer Applications in Water Supply 1, Research Studies Press (1988) 1-20
//	[C]  M. Collins, L. Cooper, R. Helgason, J. Kennington, L. LeBlanc, Solving the pipe
//	     network analysis problem using optimization techniques, Management Science 24
//	     (1978) 747-760: the content and its uniqueness
//	[W]  M. A. Woodbury, Inverting modified matrices, Princeton Statistical Research
//	     Group Memo 42 (1950)
//	[G]  G. Strang, Computational Science and Engineering, Wellesley-Cambridge (2007),
//	     sect. 8.7: adjoint methods
package hydraulic
