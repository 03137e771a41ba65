package hydraulic_test

import (
	"fmt"
	"math"

	"tapround/calibrate/friction"
	"tapround/calibrate/hydraulic"
)

// Three reservoirs joined at one point, with the pipes of a textbook (White, Fluid
// Mechanics, example 6.18, from memory: junction 34.53 m; flows 52.8, 47.0, 5.8 m3/h).
func Example() {
	points := []hydraulic.Point{{Name: "R1", Kind: hydraulic.Fixed}, {Name: "R2", Kind: hydraulic.Fixed}, {Name: "R3", Kind: hydraulic.Fixed}, {Name: "J"}}
	pipe := func(name string, from int, length, bore float64) hydraulic.Link {
		return hydraulic.Link{Name: name, From: from, To: 3, Pipe: &hydraulic.Pipe{Pipe: friction.Pipe{Length: length, Bore: bore}}}
	}
	system, err := hydraulic.NewSystem(points, []hydraulic.Link{pipe("P1", 0, 100, 0.08), pipe("P2", 1, 150, 0.06), pipe("P3", 2, 80, 0.04)})
	if err != nil {
		fmt.Println(err)
		return
	}
	works := system.NewParameters()
	for i, k := range []float64{0.24e-3, 0.12e-3, 0.20e-3} {
		works.LnRough[i] = math.Log(k)
	}
	solver := system.NewSolver()
	state, err := solver.Solve(&works, &hydraulic.Conditions{Head: []float64{20, 100, 40, 0}, Viscosity: 1.02e-6, Gravity: 9.81}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("J: %.2f m\n", state.Head[3])
	for i := range state.Flow {
		fmt.Printf("%s: %.1f m3/h\n", system.Link(i).Name, 3600*state.Flow[i])
	}
	g := system.NewGradient()
	if err := solver.Gradient(hydraulic.Probe{Point: 3, Link: -1, View: hydraulic.Total}, g); err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("one litre a second more drawn at J lowers it by %.2f m\n", -g.DrawOff[3]/1000)
	// Output:
	// J: 34.54 m
	// P1: -52.8 m3/h
	// P2: 47.0 m3/h
	// P3: 5.8 m3/h
	// one litre a second more drawn at J lowers it by 1.31 m
}
