package hydraulic

import (
	"math"

	"tapround/calibrate/friction"
)

// note counts what the solved works hold.
func (w *works) note(seen map[string]int) {
	st, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
	if err != nil {
		return
	}
	if largest(st.Flow) == 0 {
		seen["all at rest"]++
	}
	if len(w.links) >= len(w.points) {
		seen["loops"]++
	} else {
		seen["tree"]++
	}
	for _, h := range st.Head {
		if math.IsNaN(h) {
			seen["not fed"]++
		}
	}
	for i, l := range w.links {
		w.noteLink(seen, i, l, st)
	}
}

func (w *works) noteLink(seen map[string]int, i int, l Link, st *State) {
	q := st.Flow[i]
	if l.Machine != nil {
		switch {
		case w.c.Stopped[i]:
			seen["stopped machine"]++
		case q > 1e-6 && l.Machine.Turbine:
			seen["turbine"]++
		case q > 1e-6:
			seen["pump"]++
		}
		return
	}
	switch re := l.Pipe.Reynolds(q, w.c.Viscosity); {
	case l.Pipe.Law == friction.HazenWilliams && q != 0:
		seen["Hazen-Williams"]++
	case re > 4000:
		seen["turbulent"]++
	case re > 2000:
		seen["transitional"]++
	case re > 1:
		seen["laminar"]++
	}
	if q < -1e-6 {
		seen["reversed"]++
	}
	if q > 1e-6 && w.points[l.To].Kind == Outlet {
		seen["outlet"]++
	}
	if q < -1e-6 && w.points[l.From].Kind == Outlet {
		seen["outlet at the From end"]++
	}
	if w.c.Shut[i] {
		seen["shut pipe"]++
	}
	for k, f := range l.Pipe.Fittings {
		switch {
		case w.c.FittingShut[w.sys.FittingIndex(i, k)]:
			seen["shut fitting"]++
		case f.OneWay && q > 1e-6:
			seen["check valve open"]++
		case f.OneWay && st.Closed[i] && !w.shut(i):
			seen["check valve closed"]++
		case f.JetBore > 0 && q > 1e-6:
			seen["jet"]++
		case !math.IsNaN(f.ReverseK) && q < -1e-6:
			seen["reversed through its own coefficient"]++
		}
	}
}
