package csvfile

import "tapround/survey"

type pointRow struct {
	Point     string `csv:"point"`
	Kind      string `csv:"kind"`
	Elevation string `csv:"elevation"`
	X         string `csv:"x"`
	Y         string `csv:"y"`
	Note      string `csv:"note"`
}

func readPoints(sh *sheet) {
	kinds := []survey.PointKind{survey.Junction, survey.Reservoir, survey.Outlet}
	for r, x := range rowsOf[pointRow](sh) {
		sh.survey.Points = append(sh.survey.Points, survey.Point{
			Name:      r.own("point", x.Point),
			Kind:      choice(r, "kind", x.Kind, kinds, map[string]survey.PointKind{"tank": survey.Reservoir, "servicereservoir": survey.Reservoir}),
			Elevation: r.needed("elevation", x.Elevation),
			X:         r.stated("x", x.X),
			Y:         r.stated("y", x.Y),
			Note:      x.Note,
			Source:    r.at,
		})
	}
}

type pipeRow struct {
	Pipe      string `csv:"pipe"`
	From      string `csv:"from"`
	To        string `csv:"to"`
	Length    string `csv:"length"`
	Bore      string `csv:"bore"`
	Material  string `csv:"material"`
	Laid      string `csv:"laid"`
	Roughness string `csv:"roughness"`
	CValue    string `csv:"c_value"`
	Group     string `csv:"group"`
	Note      string `csv:"note"`
	Spread    string `csv:"spread"`
}

func readPipes(sh *sheet) {
	for r, x := range rowsOf[pipeRow](sh) {
		sh.survey.Pipes = append(sh.survey.Pipes, survey.Pipe{
			Name:      r.own("pipe", x.Pipe),
			From:      r.name("from", x.From),
			To:        r.name("to", x.To),
			Length:    r.needed("length", x.Length),
			Bore:      r.needed("bore", x.Bore),
			Material:  x.Material,
			Laid:      r.stated("laid", x.Laid),
			Roughness: r.stated("roughness", x.Roughness),
			C:         r.stated("c_value", x.CValue),
			Group:     x.Group,
			Spread:    r.stated("spread", x.Spread),
			Note:      x.Note,
			Source:    r.at,
		})
	}
}

type levelRow struct {
	Pipe      string `csv:"pipe"`
	At        string `csv:"at"`
	Elevation string `csv:"elevation"`
}

func readLevels(sh *sheet) {
	for r, x := range rowsOf[levelRow](sh) {
		sh.survey.Levels = append(sh.survey.Levels, survey.Level{
			Pipe:      r.name("pipe", x.Pipe),
			At:        r.needed("at", x.At),
			Elevation: r.needed("elevation", x.Elevation),
			Source:    r.at,
		})
	}
}

type fittingRow struct {
	Fitting         string `csv:"fitting"`
	Pipe            string `csv:"pipe"`
	At              string `csv:"at"`
	Kind            string `csv:"kind"`
	Bore            string `csv:"bore"`
	LossCoefficient string `csv:"loss_coefficient"`
	Note            string `csv:"note"`
	Spread          string `csv:"spread"`
}

// fittingWords are other names of the same device (common practice); words that leave
// the direction of flow open, such as reducer, are not among them.
var fittingWords = map[string]survey.FittingKind{
	"sluicevalve": survey.GateValve, "nonreturnvalve": survey.CheckValve, "refluxvalve": survey.CheckValve,
	"flowmeter": survey.MeterFitting, "expansion": survey.Enlargement,
}

func readFittings(sh *sheet) {
	for r, x := range rowsOf[fittingRow](sh) {
		sh.survey.Fittings = append(sh.survey.Fittings, survey.Fitting{
			Name:   r.own("fitting", x.Fitting),
			Pipe:   r.name("pipe", x.Pipe),
			At:     r.needed("at", x.At),
			Kind:   choice(r, "kind", x.Kind, survey.FittingKinds, fittingWords),
			Bore:   r.stated("bore", x.Bore),
			K:      r.stated("loss_coefficient", x.LossCoefficient),
			Spread: r.stated("spread", x.Spread),
			Note:   x.Note,
			Source: r.at,
		})
	}
}

type machineRow struct {
	Machine string `csv:"machine"`
	From    string `csv:"from"`
	To      string `csv:"to"`
	Kind    string `csv:"kind"`
	Speed   string `csv:"speed"`
	Note    string `csv:"note"`
}

func readMachines(sh *sheet) {
	for r, x := range rowsOf[machineRow](sh) {
		sh.survey.Machines = append(sh.survey.Machines, survey.Machine{
			Name:   r.own("machine", x.Machine),
			From:   r.name("from", x.From),
			To:     r.name("to", x.To),
			Kind:   choice(r, "kind", x.Kind, []survey.MachineKind{survey.Pump, survey.Turbine}, nil),
			Speed:  r.stated("speed", x.Speed),
			Note:   x.Note,
			Source: r.at,
		})
	}
}

type dutyRow struct {
	Machine    string `csv:"machine"`
	Flow       string `csv:"flow"`
	Head       string `csv:"head"`
	Efficiency string `csv:"efficiency"`
}

func readDuty(sh *sheet) {
	machines := map[string]*survey.Machine{}
	var names []string
	for i := range sh.survey.Machines {
		m := &sh.survey.Machines[i]
		machines[m.Name] = m
		names = append(names, m.Name)
	}
	for r, x := range rowsOf[dutyRow](sh) {
		d := survey.DutyPoint{
			Flow:       r.needed("flow", x.Flow),
			Head:       r.needed("head", x.Head),
			Efficiency: r.stated("efficiency", x.Efficiency),
			Source:     r.at,
		}
		if r.known("machine", r.name("machine", x.Machine), "machines.csv", names) {
			machines[x.Machine].Duty = append(machines[x.Machine].Duty, d)
		}
	}
}
