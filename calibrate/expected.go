package calibrate

import (
	"math"

	"tapround/calibrate/hydraulic"
)

// Expected is what the works should show at the expected values, before any
// reading: for a field sheet, for planning, and for making a survey whose truth is
// known.
type Expected struct {
	m *Model
	w *Workspace
}

// Expected solves every round at the expected values.
func (m *Model) Expected() (*Expected, error) {
	w := m.NewWorkspace()
	if err := w.solve(); err != nil {
		return nil, err
	}
	return &Expected{m: m, w: w}, nil
}

// Piezometric is the piezometric head at a tap in a round (by their indices), m;
// NaN where nothing feeds it.
func (e *Expected) Piezometric(round, tap int) float64 {
	return e.w.solvers[round].Read(e.m.ProbeOf(e.m.Survey.Taps[tap].Name, hydraulic.Piezometric))
}

// Flow is the flow in the pipe at a tap, m3/s, positive from its From to its To.
func (e *Expected) Flow(round, tap int) float64 {
	return e.w.solvers[round].Read(e.m.ProbeOf(e.m.Survey.Taps[tap].Name, hydraulic.Flow))
}

// FlowOf is the flow of a pipe or machine; NaN for an unknown name.
func (e *Expected) FlowOf(round int, link string) float64 {
	l := e.m.LinkIndex(link)
	if l < 0 {
		return math.NaN()
	}
	return e.w.states[round].Flow[l]
}

// Total is the total head at a tap in a round, m.
func (e *Expected) Total(round, tap int) float64 {
	return e.w.solvers[round].Read(e.m.ProbeOf(e.m.Survey.Taps[tap].Name, hydraulic.Total))
}
