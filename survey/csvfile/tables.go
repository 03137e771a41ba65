package csvfile

import (
	"tapround/survey"
	"tapround/survey/unit"
)

// tables lists every table in the order it must be read: a row's unit may depend
// on what an earlier table says of the item. Synonyms are common practice on
// drawings, gauge sheets and meter logs in Britain, Australia and North America.
func tables() []spec {
	list := []spec{
		{file: "survey.csv", read: readInfo, columns: []column{
			{name: "item", required: true, also: "setting key"},
			{name: "value", kind: byRow, required: true},
			{name: "unit", also: "units uom"},
		}},
		{file: "points.csv", required: true, missing: "it lists where pipes meet and end", read: readPoints, columns: []column{
			{name: "point", required: true, also: "node pointno pointid pointname nodeid"},
			{name: "kind", required: true, also: "type"},
			{name: "elevation", kind: measured, dim: unit.Length, required: true, also: "elev level groundlevel reducedlevel rl altitude z"},
			{name: "x", kind: measured, dim: unit.Length, also: "easting east"},
			{name: "y", kind: measured, dim: unit.Length, also: "northing north"},
			note,
		}},
		{file: "pipes.csv", required: true, missing: "it lists the pipes", read: readPipes, columns: []column{
			{name: "pipe", required: true, also: "main pipeno pipeid pipename reach"},
			{name: "from", required: true, also: "frompoint fromnode upstream upstreampoint us"},
			{name: "to", required: true, also: "topoint tonode downstream downstreampoint ds"},
			{name: "length", kind: measured, dim: unit.Length, required: true, also: "len pipelength"},
			{name: "bore", kind: measured, dim: unit.Length, required: true, also: bores},
			{name: "material", also: "mat pipematerial"},
			{name: "laid", kind: plain, also: "yearlaid installed yearinstalled year"},
			{name: "roughness", kind: measured, dim: unit.Length, also: "ks k absoluteroughness roughnessheight equivalentroughness"},
			{name: "c_value", kind: plain, also: "c cfactor hazenwilliamsc hwc"},
			{name: "group", also: "class"},
			note,
			{name: "spread", kind: plain},
		}},
		{file: "levels.csv", read: readLevels, columns: []column{
			{name: "pipe", required: true, also: "main pipeno pipeid pipename reach"},
			{name: "at", kind: measured, dim: unit.Length, required: true, also: stations},
			{name: "elevation", kind: measured, dim: unit.Length, required: true, also: "elev level pipelevel reducedlevel rl altitude z"},
		}},
		{file: "fittings.csv", read: readFittings, columns: []column{
			{name: "fitting", required: true, also: "valve fittingno fittingid fittingname"},
			{name: "pipe", required: true, also: "main pipeno pipeid reach"},
			{name: "at", kind: measured, dim: unit.Length, required: true, also: stations},
			{name: "kind", required: true, also: "type fittingtype"},
			{name: "bore", kind: measured, dim: unit.Length, also: bores},
			{name: "loss_coefficient", kind: plain, also: "k kvalue losscoeff zeta"},
			note,
			{name: "spread", kind: plain},
		}},
		{file: "machines.csv", read: readMachines, columns: []column{
			{name: "machine", required: true, also: "pump turbine machineno machineid"},
			{name: "from", required: true, also: "frompoint suction inlet suctionpoint"},
			{name: "to", required: true, also: "topoint delivery outlet deliverypoint discharge"},
			{name: "kind", required: true, also: "type"},
			{name: "speed", kind: measured, dim: unit.Rotation, also: "ratedspeed"},
			note,
		}},
		{file: "duty.csv", read: readDuty, columns: []column{
			{name: "machine", required: true, also: "pump turbine machineno machineid"},
			{name: "flow", kind: measured, dim: unit.Flow, required: true, also: "q discharge"},
			{name: "head", kind: measured, dim: unit.Length, required: true, also: "h lift"},
			{name: "efficiency", kind: measured, dim: unit.Fraction, also: "eff eta"},
		}},
		{file: "taps.csv", required: true, missing: "it lists where readings are taken", read: readTaps, columns: []column{
			{name: "tap", required: true, also: "tapping tapno tapid tapname testpoint pressurepoint"},
			{name: "pipe", also: "main pipeno pipeid reach"},
			{name: "at", kind: measured, dim: unit.Length, also: stations},
			{name: "point", also: "node pointno pointid"},
			{name: "elevation", kind: measured, dim: unit.Length, required: true, also: "elev level taplevel reducedlevel rl altitude z"},
			{name: "elevation_sd", kind: measured, dim: unit.Length, also: "elevsd levelsd sdelevation"},
			{name: "outlet_bore", kind: measured, dim: unit.Length, also: "outletdiameter outletdia nozzlebore nozzlediameter"},
			{name: "outlet_coefficient", kind: plain, also: "outletcoeff coefficientofdischarge cd"},
			note,
		}},
		{file: "gauges.csv", required: true, missing: "nothing is known of a reading's error without its gauge", read: readGauges, columns: []column{
			{name: "gauge", required: true, also: "gaugeno gaugeid serial serialno instrument meter"},
			{name: "kind", required: true, also: "type gaugetype"},
			{name: "low", kind: byRow, required: true, also: "min minimum rangelow rangemin"},
			{name: "high", kind: byRow, required: true, also: "max maximum rangehigh rangemax"},
			{name: "unit", required: true, also: "units uom"},
			{name: "accuracy", kind: measured, dim: unit.Fraction, also: "class accuracyclass grade"},
			{name: "resolution", kind: byRow, also: "division smalleststep graduation step"},
			{name: "line", also: "linefilling filling gaugeline"},
			{name: "checked", also: "calibrated calibrationdate datechecked lastchecked"},
			note,
			{name: "gain_sd", kind: measured, dim: unit.Fraction},
		}},
		{file: "gauge_checks.csv", read: readChecks, columns: []column{
			{name: "gauge", required: true, also: "gaugeno gaugeid serial serialno instrument meter"},
			{name: "applied", kind: byRow, required: true, also: "true standard reference"},
			{name: "indicated", kind: byRow, required: true, also: "shown reading"},
			{name: "unit", required: true, also: "units uom"},
			{name: "checked", also: "date calibrated datechecked"},
		}},
		{file: "rounds.csv", required: true, missing: "it says when each round was read", read: readRounds, columns: []column{
			{name: "round", required: true, also: "roundno roundid run"},
			{name: "start", kind: moment, also: "begin starttime from"},
			{name: "end", kind: moment, also: "finish stop endtime to"},
			{name: "water_temperature", kind: measured, dim: unit.Temperature, also: "watertemp temperature temp"},
			{name: "barometer", kind: measured, dim: unit.Pressure, also: "barometricpressure atmosphericpressure baro"},
			note,
		}},
		{file: "conditions.csv", required: true, missing: "it says the reservoirs' levels and what was drawn off", mayBeEmpty: true, read: readConditions, columns: []column{
			{name: "round", required: true, also: "roundno roundid run"},
			{name: "item", required: true},
			{name: "condition", required: true, also: "state"},
			{name: "value", kind: byRow, required: true},
			{name: "unit", required: true, also: "units uom"},
			{name: "sd", kind: byRow, also: "standarddeviation standarduncertainty"},
		}},
		{file: readingsFile, required: true, missing: "there is no reading in readings.csv or the folder readings", read: readReadings, rowFault: survey.SetAside, columns: []column{
			{name: "round", required: true, also: "roundno roundid run"},
			{name: "time", kind: moment, also: "datetime timestamp dateandtime"},
			{name: "tap", required: true, also: "tapping tapno tapid tapname testpoint pressurepoint"},
			{name: "other_tap", also: "secondtap lowtap minustap"},
			{name: "kind", required: true, also: "type readingkind"},
			{name: "gauge", required: true, also: "gaugeno gaugeid serial serialno instrument meter"},
			{name: "reading", kind: byRow, required: true, also: "value observed gaugereading"},
			{name: "unit", required: true, also: "units uom"},
			{name: "gauge_height", kind: measured, dim: unit.Length, also: "heightofgauge gaugeabovetap"},
			{name: "depth", kind: measured, dim: unit.Length, also: "depthfromwall insertion pitotdepth"},
			{name: "remark", also: "remarks note notes comment comments"},
		}},
		{file: "requirements.csv", read: readRequirements, columns: []column{
			{name: "requirement", required: true, also: "requirementno clause"},
			{name: "kind", required: true, also: "type"},
			{name: "item", required: true},
			{name: "to"},
			{name: "at_flow", kind: measured, dim: unit.Flow, also: "flow dutyflow"},
			{name: "limit", kind: byRow, required: true},
			{name: "unit", also: "units uom"},
			{name: "grade"},
			note,
		}},
		{file: "loggers.csv", read: readLoggers, columns: []column{
			{name: "channel", required: true, also: "channelno channelid"},
			{name: "file", required: true, also: "filename logfile"},
			{name: "tap", required: true, also: "tapping tapno tapid tapname testpoint pressurepoint"},
			{name: "kind", required: true, also: "type readingkind"},
			{name: "gauge", also: "gaugeno gaugeid serial serialno instrument meter"},
			{name: "unit", required: true, also: "units uom"},
			{name: "clock_offset", kind: measured, dim: unit.Duration, also: "clockcorrection timeoffset"},
			{name: "time_zone", also: "zone tz"},
			note,
		}},
	}
	for i := range list {
		if list[i].rowFault == survey.Notice {
			list[i].rowFault = survey.Fatal
		}
		list[i] = list[i].index()
	}
	return list
}

const (
	bores    = "diameter dia diam internaldiameter insidediameter innerdiameter borediameter pipediameter"
	stations = "chainage station stationing distance position ch"
)

// readingsFile is also the kind of every table in the folder readings.
const readingsFile = "readings.csv"

var note = column{name: "note", also: "notes comment comments remark remarks"}
