package fault

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate"
	"tapround/calibrate/stat"
)

// screening is the linear test of every cause at one fit: with a the whitened
// signature of a cause and V the covariance of the whitened readings,
//
//	z = -(a' V^-1 v) / sqrt(a' V^-1 a),  size = -(a' V^-1 v) / (a' V^-1 a)
//
// v being predicted minus measured; T = z^2 is the drop of Phi in a linear problem
// [Willsky-Jones]. z has the sign of the fault.
type screening struct {
	signature *mat.Dense // readings by causes
	whitened  *mat.Dense // V^-1 signature
	info      []float64  // a' V^-1 a; 0 where the readings do not see the cause
	z, size   []float64
}

// blind is the information below which a cause is not seen at all: a fault of a
// thousand spreads would shift the readings by less than one standard deviation.
const blind = 1e-6

func screen(f *calibrate.Fit, causes []Cause) (*screening, error) {
	unknowns := make([]calibrate.Unknown, len(causes))
	for i, c := range causes {
		unknowns[i] = c.Unknown
	}
	a, err := f.Columns(unknowns)
	if err != nil {
		return nil, err
	}
	n, k := a.Dims()
	s := &screening{signature: a, whitened: mat.NewDense(n, k, nil), info: make([]float64, k), z: make([]float64, k), size: make([]float64, k)}
	v := f.Innovation()
	col := mat.NewVecDense(n, nil)
	for j := 0; j < k; j++ {
		col.CopyVec(a.ColView(j))
		y := f.Whiten(col)
		for i := 0; i < n; i++ {
			s.whitened.Set(i, j, y.AtVec(i))
		}
		s.info[j] = mat.Dot(col, y)
		if s.info[j]*unknowns[j].SD*unknowns[j].SD < blind {
			s.info[j] = 0
			continue
		}
		score := -mat.Dot(v, y)
		s.z[j] = score / math.Sqrt(s.info[j])
		s.size[j] = score / s.info[j]
	}
	return s, nil
}

// rho is the cosine of two signatures under V^-1: 1 and -1 mean that no reading of
// this survey tells the two apart.
func (s *screening) rho(i, j int) float64 {
	if s.info[i] == 0 || s.info[j] == 0 {
		return 0
	}
	n, _ := s.signature.Dims()
	d := 0.0
	for r := 0; r < n; r++ {
		d += s.signature.At(r, i) * s.whitened.At(r, j)
	}
	return d / math.Sqrt(s.info[i]*s.info[j])
}

// passes gives |z|, or 0 where the sign speaks against the cause [Self-Liang].
func (s *screening) passes(i int, sign int) float64 {
	if sign != 0 && s.z[i]*float64(sign) <= 0 {
		return 0
	}
	return math.Abs(s.z[i])
}

// limits finds, by simulation of the joint law of all z under sound works, the
// value that the largest keeps with the family-wide false-alarm rate [Westfall].
func (s *screening) limits(causes []Cause, set Settings) float64 {
	var seen []int
	for i := range causes {
		if s.info[i] > 0 {
			seen = append(seen, i)
		}
	}
	if len(seen) == 0 {
		return math.Inf(1)
	}
	corr := mat.NewSymDense(len(seen), nil)
	sides := make([]int, len(seen))
	for a, i := range seen {
		sides[a] = 2
		if causes[i].Unknown.Sign != 0 {
			sides[a] = 1
		}
		for b := a; b < len(seen); b++ {
			r := s.rho(i, seen[b])
			// A one-sided test looks one way only: turn its signature that way.
			if causes[i].Unknown.Sign < 0 {
				r = -r
			}
			if causes[seen[b]].Unknown.Sign < 0 {
				r = -r
			}
			corr.SetSym(a, b, r)
		}
		corr.SetSym(a, a, 1)
	}
	return stat.FamilyLimit(corr, sides, set.FalseAlarm, set.Draws, set.Seed)
}

// guess is a starting value of theta for a cause from its linear size: the loss
// is linear in K and nearly so in the friction factor, not in their logarithms.
func guess(m *calibrate.Model, f *calibrate.Fit, c Cause, size float64) []float64 {
	sign := 1.0
	if c.Unknown.Sign < 0 {
		sign = -1
	}
	switch {
	case c.Unknown.Quantity == "loss_coefficient" && c.Unknown.Log:
		return spread(math.Log1p(math.Max(0.5, size)), 0.6, 1)
	case c.Unknown.Quantity == "roughness" && c.Unknown.Log:
		return spread(roughnessFor(m, f, c, size), 0.6, 1)
	case c.Unknown.Log:
		return spread(sign*math.Min(1.5, math.Abs(size)), 0.6, 1)
	}
	return []float64{size}
}

func spread(x float64, factors ...float64) []float64 {
	out := make([]float64, len(factors))
	for i, f := range factors {
		out[i] = x * f
	}
	return out
}

// roughnessFor gives the rise of ln k that multiplies the friction loss by what
// the linear size asks for, at the largest fitted flow.
func roughnessFor(m *calibrate.Model, f *calibrate.Fit, c Cause, size float64) float64 {
	l := m.LinkIndex(c.Item)
	if c.Unknown.Kind == "group" || l < 0 {
		return math.Min(3, math.Max(0.3, size))
	}
	p := m.System.Link(l).Pipe
	most, round := 0.0, 0
	for r := range m.Rounds {
		if q := math.Abs(f.FlowOf(r, l)); q > most {
			most, round = q, r
		}
	}
	if most == 0 {
		return 1
	}
	cond := f.Conditions(round)
	now := p.Loss(most, f.LnRough(l), cond.Viscosity, cond.Gravity)
	want := now.H + math.Max(0.3*now.H, size*now.DParam)
	lo, hi := 0.0, math.Max(0.1, math.Log(0.3*p.Bore)-f.LnRough(l))
	for i := 0; i < 40; i++ {
		mid := (lo + hi) / 2
		if p.Loss(most, f.LnRough(l)+mid, cond.Viscosity, cond.Gravity).H < want {
			lo = mid
		} else {
			hi = mid
		}
	}
	return math.Max(0.2, lo)
}
