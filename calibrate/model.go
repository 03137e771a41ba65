package calibrate

import (
	"fmt"
	"math"

	"tapround/calibrate/friction"
	"tapround/calibrate/hydraulic"
	"tapround/survey"
	"tapround/survey/water"
)

// Model is a survey made ready to be fitted: the pipe system, each round's
// conditions, the readings as observations, and the unknowns of sound works. It
// is read-only once made and may be shared by goroutines; a Workspace holds what
// one evaluation needs.
type Model struct {
	Survey   *survey.Survey
	System   *hydraulic.System
	Priors   Priors
	Rounds   []RoundModel
	Obs      []Observation
	Unknowns []Unknown
	// Unread lists heads that the model cannot see, with the reason: nothing
	// feeds their part of the system in that round.
	Unread []Unread

	left   map[int]bool // observations that stay out of every fit
	base   hydraulic.Parameters
	points map[string]int
	links  map[string]int // pipes, then machines
	fits   map[string]int // fitting name to flat index
	taps   map[string]int
	gauges map[string]int
	rounds map[string]int
	// fitPlace gives link and place in the link's list for each flat fitting.
	fitPlace []fitPlace
	readsOn  []int // per point: the link a tap at that point reads on, -1 none
}

type fitPlace struct {
	link, order int
	fitting     int // index in Survey.Fittings
}

// RoundModel is one round: its conditions at the stated (prior mean) values.
type RoundModel struct {
	Name       string
	Conditions hydraulic.Conditions
	Density    float64
	Flowing    bool // water moves somewhere, at the expected values
	Caveats    []string
}

// Unread is a head that stays out of the fit and why.
type Unread struct {
	Head   survey.Head
	Reason string
}

// New makes the model of a survey and its heads. It returns an error only when
// the steady model cannot be solved at the expected values; the error says
// which data would make it so.
func New(s *survey.Survey, heads []survey.Head, p Priors) (*Model, error) {
	m := &Model{Survey: s, Priors: p}
	if err := m.buildSystem(); err != nil {
		return nil, err
	}
	m.buildRounds()
	m.buildUnknowns(heads)
	if err := m.observe(heads); err != nil {
		return nil, err
	}
	return m, nil
}

// buildSystem turns points, pipes, fittings and machines into the index-based
// system of the steady model.
func (m *Model) buildSystem() error {
	s := m.Survey
	m.points, m.links, m.fits = map[string]int{}, map[string]int{}, map[string]int{}
	m.taps, m.gauges, m.rounds = index(s.Taps, func(t survey.Tap) string { return t.Name }),
		index(s.Gauges, func(g survey.Gauge) string { return g.Name }),
		index(s.Rounds, func(r survey.Round) string { return r.Name })
	points := make([]hydraulic.Point, len(s.Points))
	for i, p := range s.Points {
		m.points[p.Name] = i
		kind := hydraulic.Junction
		switch p.Kind {
		case survey.Reservoir:
			kind = hydraulic.Fixed
		case survey.Outlet:
			kind = hydraulic.Outlet
		}
		points[i] = hydraulic.Point{Name: p.Name, Kind: kind, Elevation: p.Elevation}
	}
	var links []hydraulic.Link
	law := lawOf(s.Info.FrictionLaw)
	for _, p := range s.Pipes {
		m.links[p.Name] = len(links)
		links = append(links, hydraulic.Link{Name: p.Name, From: m.points[p.From], To: m.points[p.To],
			Pipe: &hydraulic.Pipe{Pipe: friction.Pipe{Law: law, Length: p.Length, Bore: p.Bore}}})
	}
	onPipe := fittingsByPipe(s)
	for i, p := range s.Pipes {
		outletEnd := s.Points[m.points[p.To]].Kind == survey.Outlet
		for _, fi := range onPipe[p.Name] {
			links[i].Pipe.Fittings = append(links[i].Pipe.Fittings, fittingOf(s.Fittings[fi], p, outletEnd))
		}
	}
	for _, x := range s.Machines {
		flow, head := make([]float64, len(x.Duty)), make([]float64, len(x.Duty))
		for i, d := range x.Duty {
			flow[i], head[i] = d.Flow, d.Head
		}
		curve, err := friction.NewCurve(flow, head)
		if err != nil {
			return fmt.Errorf("machine %s: works curve of duty.csv: %w", x.Name, err)
		}
		m.links[x.Name] = len(links)
		links = append(links, hydraulic.Link{Name: x.Name, From: m.points[x.From], To: m.points[x.To],
			Machine: &hydraulic.Machine{Turbine: x.Kind == survey.Turbine, Curve: curve, RatedSpeed: x.Speed.Or(0)}})
	}
	sys, err := hydraulic.NewSystem(points, links)
	if err != nil {
		return err
	}
	m.System = sys
	m.expected(onPipe)
	m.readsOn = m.widestPipes()
	return nil
}

// expected fills the parameters of sound works.
func (m *Model) expected(onPipe map[string][]int) {
	s := m.Survey
	m.base = m.System.NewParameters()
	for i, p := range s.Pipes {
		if s.Info.FrictionLaw == survey.HazenWilliams {
			m.base.LnRough[i] = math.Log(p.C.V)
		} else {
			m.base.LnRough[i] = math.Log(p.Roughness.V)
		}
		for order, fi := range onPipe[p.Name] {
			flat := m.System.FittingIndex(i, order)
			m.fits[s.Fittings[fi].Name] = flat
			m.base.LnK[flat] = math.Log(math.Max(s.Fittings[fi].K.V, minK))
		}
	}
	m.fitPlace = make([]fitPlace, m.System.NumFittings())
	for i, p := range s.Pipes {
		for order, fi := range onPipe[p.Name] {
			m.fitPlace[m.System.FittingIndex(i, order)] = fitPlace{link: i, order: order, fitting: fi}
		}
	}
	for i := range m.base.HeadFactor {
		m.base.HeadFactor[i] = 1
	}
}

// fittingsByPipe lists the fittings of each pipe, nearest the From end first;
// those at one chainage keep the order of the table.
func fittingsByPipe(s *survey.Survey) map[string][]int {
	out := map[string][]int{}
	for i, f := range s.Fittings {
		list := out[f.Pipe]
		at := len(list)
		for at > 0 && s.Fittings[list[at-1]].At > f.At {
			at--
		}
		list = append(list, 0)
		copy(list[at+1:], list[at:])
		list[at] = i
		out[f.Pipe] = list
	}
	return out
}

// fittingOf gives the steady model's view of a fitting: the bore its coefficient
// is on (the smaller one at a change of bore) and what reversed flow meets.
func fittingOf(f survey.Fitting, p survey.Pipe, outletEnd bool) hydraulic.Fitting {
	out := hydraulic.Fitting{Name: f.Name, At: f.At, Bore: f.Bore.Or(p.Bore), ReverseK: math.NaN(),
		OneWay: f.Kind == survey.CheckValve}
	if !f.Kind.ChangesBore() {
		return out
	}
	other := f.Bore.Or(p.Bore)
	small, large := math.Min(other, p.Bore), math.Max(other, p.Bore)
	out.Bore = small
	beta := small / large
	switch f.Kind {
	case survey.Enlargement:
		out.ReverseK = friction.ContractionK(beta)
	case survey.Contraction:
		out.ReverseK = friction.EnlargementK(beta)
	case survey.Nozzle:
		if outletEnd && f.At >= p.Length-1e-6 {
			out.JetBore = other
		} else {
			out.ReverseK = friction.EnlargementK(beta)
		}
	}
	return out
}

// widestPipes gives, for each point, the pipe that a tap there reads on: the one
// of largest bore, the first listed on a tie.
func (m *Model) widestPipes() []int {
	out := make([]int, len(m.Survey.Points))
	for i := range out {
		out[i] = -1
	}
	for l, p := range m.Survey.Pipes {
		for _, end := range []string{p.From, p.To} {
			at := m.points[end]
			if out[at] < 0 || m.Survey.Pipes[out[at]].Bore < p.Bore {
				out[at] = l
			}
		}
	}
	return out
}

// buildRounds resolves what is known to hold in each round.
func (m *Model) buildRounds() {
	s := m.Survey
	gravity := water.Gravity(s.Info.Latitude, s.Info.SiteLevel)
	for _, r := range s.Rounds {
		t := r.WaterTemperature.Or(s.Info.WaterTemperature)
		c := hydraulic.Conditions{
			Head: make([]float64, len(s.Points)), DrawOff: make([]float64, len(s.Points)),
			Shut: make([]bool, m.System.NumLinks()), FittingShut: make([]bool, m.System.NumFittings()),
			Stopped: make([]bool, m.System.NumLinks()), Speed: make([]float64, m.System.NumLinks()),
			Viscosity: water.KinematicViscosity(t), Gravity: gravity,
		}
		f := s.InForce(r.Name)
		for _, p := range s.Points {
			i := m.points[p.Name]
			c.Head[i] = p.Elevation
			if l, ok := f.Levels[p.Name]; ok && l.Value.OK {
				c.Head[i] = l.Value.V
			}
			for _, d := range f.DrawOffs[p.Name] {
				c.DrawOff[i] += d.Value.Or(0)
			}
		}
		for _, x := range s.Machines {
			l := m.links[x.Name]
			c.Stopped[l] = f.Stopped[x.Name]
			if v, ok := f.Speeds[x.Name]; ok {
				c.Speed[l] = v.Value.Or(0)
			}
		}
		for _, p := range s.Pipes {
			c.Shut[m.links[p.Name]] = f.Shut[p.Name]
		}
		for _, x := range s.Fittings {
			c.FittingShut[m.fits[x.Name]] = f.Shut[x.Name]
		}
		m.Rounds = append(m.Rounds, RoundModel{Name: r.Name, Conditions: c, Density: water.Density(t)})
	}
}

func lawOf(l survey.FrictionLaw) friction.Law {
	if l == survey.HazenWilliams {
		return friction.HazenWilliams
	}
	return friction.DarcyWeisbach
}

func index[T any](list []T, name func(T) string) map[string]int {
	out := make(map[string]int, len(list))
	for i, x := range list {
		out[name(x)] = i
	}
	return out
}
