package survey_test

// worksCases are faults of the works: names, pipes, fittings, machines, parts.
var worksCases = []validateGroup{
	{"names", []validateCase{
		{"space in a name", []change{{"taps.csv", "T1,P1", "T 1,P1"}, {"readings.csv", "T1,", "T 1,"}, {"requirements.csv", "T1,T2", "T 1,T2"}, {"loggers.csv", "T1", "T 1"}}, []string{
			`notice: taps.csv:2 "T 1": a name with a space in it: lists in the result tables are separated by spaces; write names without spaces, such as T-1`,
		}},
		{"names alike", []change{{"taps.csv", "T2,,,C", "T-1,,,C"}, {"readings.csv", "T2", "T-1"}, {"readings/crew-2.csv", "T2", "T-1"}, {"requirements.csv", "T1,T2", "T1,T-1"}, {"requirements.csv", "least,T2", "least,T-1"}}, []string{
			`notice: taps.csv:3 "T-1": differs from T1 in letter case, spaces or hyphens only; they are two names here; write one name in one way`,
		}},
		{"pipe and machine of one name", []change{{"pipes.csv", "P2,B", "M1,B"}, {"taps.csv", "Q1,P2", "Q1,M1"}, {"requirements.csv", "most,P2", "most,M1"}}, []string{
			`error: machines.csv:2, machine "M1": a pipe has the same name (pipes.csv:3); give one of them another name: results list both in one column`,
			`error: conditions.csv:3, item "M1": means two things: a pipe and a machine (pipes.csv:3, machines.csv:2); give them different names`,
			`error: conditions.csv:4, item "M1": means two things: a pipe and a machine (pipes.csv:3, machines.csv:2); give them different names`,
		}},
	}},
	{"works", []validateCase{
		{"level off the earth", []change{{"points.csv", "A,junction,120", "A,junction,12000"}}, []string{
			`error: points.csv:3, elevation "12000 m": is no level on earth; correct the number or its unit`,
		}},
		{"pipe to an unknown point", []change{{"pipes.csv", "P1,R,A", "P1,R,AA"}}, []string{
			`error: pipes.csv:2, to "AA": points.csv does not have it; did you mean A? If not, add AA to points.csv`,
		}},
		{"pipe to a point unlike any", []change{{"pipes.csv", "P1,R,A", "P1,R,Qwerty"}}, []string{
			`error: pipes.csv:2, to "Qwerty": points.csv does not have it; add Qwerty to points.csv, or correct the name`,
		}},
		{"pipe to itself", []change{{"pipes.csv", "P2,B,C", "P2,C,C"}}, []string{
			`error: pipes.csv:3, to "C": the pipe leads from a point to itself; write the point at its other end`,
		}},
		{"no length", []change{{"pipes.csv", "P2,B,C,800", "P2,B,C,0"}, {"taps.csv", "Q1,P2,100", "Q1,P2,0"}}, []string{
			`error: pipes.csv:3, length "0 m": must be above nought; correct the number`,
		}},
		{"length below nought", []change{{"pipes.csv", "P2,B,C,800", "P2,B,C,-800"}, {"taps.csv", "Q1,P2,100,", "Q1,,,B"}}, []string{
			`error: pipes.csv:3, length "-800 m": must be above nought; correct the number`,
		}},
		{"bore in another unit", []change{{"pipes.csv", "800,150", "800,150000"}}, []string{
			`error: pipes.csv:3, bore "150 m": no pipe has such a bore; correct the number or the unit in the heading`,
		}},
		{"unusual bore", []change{{"pipes.csv", "800,150", "800,6000"}}, []string{
			`notice: pipes.csv:3, bore "6000 mm": is an unusual bore; look at the number and the unit in the heading`,
		}},
		{"very small bore", []change{{"pipes.csv", "C,Z,400,100", "C,Z,400,0.5"}, {"fittings.csv", "nozzle,50", "nozzle,0.3"}, {"pipes.csv", ",,0.1,", ",,0.01,"}}, []string{
			`notice: pipes.csv:4, bore "0.5 mm": is an unusual bore; look at the number and the unit in the heading`,
		}},
		{"very long", []change{{"pipes.csv", "P2,B,C,800", "P2,B,C,200000"}}, []string{
			`notice: pipes.csv:3, length "200000 m": is unusually long for one pipe; look at the number and the unit in the heading`,
		}},
		{"roughness nought", []change{{"pipes.csv", "1990,0.02", "1990,0"}}, []string{
			`error: pipes.csv:3, roughness "0 mm": must be above nought; write 0.0015 mm for a smooth pipe, or leave it empty for the built-in table`,
		}},
		{"roughness beyond the bore", []change{{"pipes.csv", "1990,0.02", "1990,90"}}, []string{
			`error: pipes.csv:3, roughness "90 mm": is more than half the bore of 150 mm; correct the number or the units in the headings`,
		}},
		{"roughness beyond friction formulas", []change{{"pipes.csv", "1990,0.02", "1990,20"}}, []string{
			`notice: pipes.csv:3, roughness "20 mm": is more than a tenth of the bore of 150 mm, beyond what friction formulas hold for; look at the number and the units in the headings`,
		}},
		{"coefficient below nought", []change{{"pipes.csv", "1990,0.02,", "1990,0.02,-1"}}, []string{
			`error: pipes.csv:3, c_value "-1": must be above nought; correct the number, or leave it empty for the built-in table`,
		}},
		{"unusual coefficient", []change{{"pipes.csv", "1990,0.02,", "1990,0.02,14"}}, []string{
			`notice: pipes.csv:3, c_value "14": is an unusual coefficient; look at the number; sound pipes have about 90 to 150`,
		}},
		{"very smooth coefficient", []change{{"pipes.csv", "1990,0.02,", "1990,0.02,190"}}, []string{
			`notice: pipes.csv:3, c_value "190": is an unusual coefficient; look at the number; sound pipes have about 90 to 150`,
		}},
		{"sound coefficient", []change{{"pipes.csv", "1990,0.02,", "1990,0.02,145"}}, nil},
		{"year of two figures", []change{{"pipes.csv", "PVC,1990", "PVC,90"}}, []string{
			`notice: pipes.csv:3, laid "90": is an unusual year; write the year with four figures`,
		}},
		{"spread of one", []change{{"pipes.csv", ",1.4", ",1"}}, []string{
			`error: pipes.csv:3, spread "1": is a factor and must be above 1; write 1.5 for an expected value that may be off by half`,
		}},
		{"wide spread", []change{{"pipes.csv", ",1.4", ",50"}}, []string{
			`notice: pipes.csv:3, spread "50": is a very wide spread; the expected value then says next to nothing; look at the number`,
		}},
		{"level on an unknown pipe", []change{{"levels.csv", "P1,100", "P11,100"}}, []string{
			`error: levels.csv:2, pipe "P11": pipes.csv does not have it; did you mean P1? If not, add P11 to pipes.csv`,
		}},
		{"level beyond a pipe", []change{{"levels.csv", "P1,300", "P1,501"}}, []string{
			`error: levels.csv:3, at "501 m": lies outside pipe P1, which is 500 m long; correct the distance, or the pipe's length`,
		}},
		{"level at the very end", []change{{"levels.csv", "P1,300", "P1,500.0000001"}}, nil},
		{"two levels at one place", []change{{"levels.csv", "P1,300", "P1,100"}}, []string{
			`error: levels.csv:3, elevation "130 m": the same place has 140 m in line 2; take one of the rows away`,
		}},
		{"level off the earth on a pipe", []change{{"levels.csv", "300,130", "300,-13000"}}, []string{
			`error: levels.csv:3, elevation "-13000 m": is no level on earth; correct the number or its unit`,
		}},
	}},
	{"fittings", []validateCase{
		{"unknown pipe", []change{{"fittings.csv", "V1,P1", "V1,P7"}}, []string{
			`error: fittings.csv:3, pipe "P7": pipes.csv does not have it; did you mean P1? If not, add P7 to pipes.csv`,
		}},
		{"beyond its pipe", []change{{"fittings.csv", "V1,P1,450", "V1,P1,550"}}, []string{
			`error: fittings.csv:3, at "550 m": lies outside pipe P1, which is 500 m long; correct the distance, or the pipe's length`,
		}},
		{"before its pipe", []change{{"fittings.csv", "V1,P1,450", "V1,P1,-1"}}, []string{
			`error: fittings.csv:3, at "-1 m": lies outside pipe P1, which is 500 m long; correct the distance, or the pipe's length`,
		}},
		{"coefficient below nought", []change{{"fittings.csv", ",,0.15", ",,-0.15"}}, []string{
			`error: fittings.csv:3, loss_coefficient "-0.15": is below nought, and no fitting gives head; correct the number`,
		}},
		{"valve all but shut", []change{{"fittings.csv", ",,0.15", ",,20000"}}, []string{
			`notice: fittings.csv:3, loss_coefficient "20000": is very large for a sound, fully open fitting; write what it has when open; a valve closed on purpose goes into conditions.csv`,
		}},
		{"bore nought", []change{{"fittings.csv", "gate-valve,,", "gate-valve,0,"}}, []string{
			`error: fittings.csv:3, bore "0 mm": must be above nought; correct the number`,
		}},
		{"bore far from its pipe's", []change{{"fittings.csv", "gate-valve,,", "gate-valve,20,"}}, []string{
			`notice: fittings.csv:3, bore "20 mm": is far from the bore of its pipe, 200 mm; look at the number and its unit: the coefficient is on the velocity head in this bore`,
		}},
		{"change of bore without a bore", []change{{"fittings.csv", "nozzle,50", "nozzle,"}}, []string{
			"error: fittings.csv:4, bore: nozzle N1 does not state the bore on its other side; write it: the coefficient is on the velocity head in the smaller of the two",
		}},
		{"change of bore to the same", []change{{"fittings.csv", "nozzle,50", "nozzle,100"}}, []string{
			`error: fittings.csv:4, bore "100 mm": nozzle N1 has the bore of its own pipe on both sides; write the bore on its other side`,
		}},
		{"change of bore the other way", []change{{"fittings.csv", "nozzle,50", "nozzle,150"}}, []string{
			`error: fittings.csv:4, bore "150 mm": nozzle N1 leads from 100 mm to 150 mm, which is the other way; correct the kind or the bore; bore is the one downstream`,
		}},
		{"nozzle within a pipe", []change{{"fittings.csv", "N1,P3,400", "N1,P3,200"}}, []string{
			`notice: fittings.csv:4, at "200 m": nozzle N1 is not at the to end of a pipe that ends at an outlet, so it is reckoned as a contraction and makes no jet; put it at 400 m of a pipe that leads to a point of kind outlet`,
		}},
		{"nozzle at a junction", []change{{"fittings.csv", "N1,P3,400", "N1,P2,800"}}, []string{
			`notice: fittings.csv:4, at "800 m": nozzle N1 is not at the to end of a pipe that ends at an outlet, so it is reckoned as a contraction and makes no jet; put it at 800 m of a pipe that leads to a point of kind outlet`,
		}},
		{"enlargement within a pipe", []change{{"fittings.csv", "gate-valve,,", "enlargement,300,"}}, []string{
			`notice: fittings.csv:3, at "450 m": enlargement V1 stands within pipe P1, which has one bore from end to end; divide the pipe there, so that each part has its own bore`,
		}},
		{"contraction to a bore that no pipe has", []change{{"fittings.csv", "V1,P1,450,gate-valve,,0.15,,1.2", "V1,P2,800,contraction,120,0.15,,1.2"}}, []string{
			`notice: fittings.csv:3, bore "120 mm": no other pipe at C has this bore; correct the bore here, or in pipes.csv`,
		}},
		{"contraction to a bore that a pipe elsewhere has", []change{{"fittings.csv", "V1,P1,450,gate-valve,,0.15,,1.2", "V1,P3,0,contraction,200,0.15,,1.2"}}, []string{
			`notice: fittings.csv:3, bore "200 mm": no other pipe at C has this bore; correct the bore here, or in pipes.csv`,
		}},
		{"contraction to the next pipe's bore", []change{{"fittings.csv", "V1,P1,450,gate-valve,,0.15,,1.2", "V1,P2,800,contraction,100,0.15,,1.2"}}, nil},
		{"enlargement from the pipe before", []change{{"fittings.csv", "V1,P1,450,gate-valve,,0.15,,1.2", "V1,P3,0,contraction,150,0.15,,1.2"}}, nil},
		{"entrance at a junction", []change{{"fittings.csv", "V1,P1,450,gate-valve", "V1,P1,450,exit"}}, []string{
			`notice: fittings.csv:3, kind "exit": stands at the end of pipe P1 where point A is no reservoir; correct the place, or the kind of the point`,
		}},
		{"reservoir end without an entrance", []change{{"fittings.csv", "E1,P1,0,entrance-sharp", "E1,P1,10,bend"}}, []string{
			`notice: pipes.csv:2, from "R": pipe P1 ends at reservoir R without an entrance or exit fitting, so no loss is reckoned there; add the fitting to fittings.csv if there is a loss`,
		}},
	}},
	{"machines", []validateCase{
		{"unknown point", []change{{"machines.csv", "M1,A,B", "M1,A,D"}}, []string{
			`error: machines.csv:2, to "D": points.csv does not have it; add D to points.csv, or correct the name`,
		}},
		{"both ends at one point", []change{{"machines.csv", "M1,A,B", "M1,A,A"}}, []string{
			`error: machines.csv:2, to "A": the pump leads from a point to itself; write the point at its other end`,
		}},
		{"no works curve", []change{{"duty.csv", "", "machine,flow [L/s],head [m]\n"}}, []string{
			`error: machines.csv:2, machine "M1": has no works curve; add its points of flow and head to duty.csv, two at least`,
		}},
		{"one point of the curve", []change{{"duty.csv", "", "machine,flow [L/s],head [m]\nM1,0,40\n"}}, []string{
			`error: duty.csv:2, machine "M1": has one point of its works curve only; add another point at least`,
		}},
		{"curve out of order", []change{{"duty.csv", "M1,10,38,60", "M1,25,38,60"}}, []string{
			`error: duty.csv:4, flow "20 L/s": does not rise from the point before, 25 L/s; put the points in the order of their flows, each flow once`,
		}},
		{"curve with one flow twice", []change{{"duty.csv", "M1,10,38,60", "M1,0,38,60"}}, []string{
			`error: duty.csv:3, flow "0 L/s": does not rise from the point before, 0 L/s; put the points in the order of their flows, each flow once`,
		}},
		{"flow below nought", []change{{"duty.csv", "M1,0,40", "M1,-1,40"}}, []string{
			`error: duty.csv:2, flow "-1 L/s": a works curve has no flow below nought; correct the sign`,
		}},
		{"head below nought", []change{{"duty.csv", "M1,20,30", "M1,20,-30"}}, []string{
			`error: duty.csv:4, head "-30 m": is below nought: a pump gives head and a turbine takes it, both counted positive; correct the sign`,
		}},
		{"efficiency beyond one", []change{{"duty.csv", "M1,20,30,72", "M1,20,30,172"}}, []string{
			`error: duty.csv:4, efficiency "172 %": must be from 0 to 100 %; correct the number or the unit in the heading`,
		}},
		{"rising curve", []change{{"duty.csv", "M1,0,40", "M1,0,36"}}, []string{
			"notice: duty.csv:2, head: the works curve of pump M1 rises with flow over a part: two flows have one head there; look at the heads; near shut-off it may be so",
		}},
		{"speed nought", []change{{"machines.csv", "pump,1480", "pump,0"}}, []string{
			"error: machines.csv:2, speed: must be above nought; correct the number",
		}},
	}},
	{"parts", []validateCase{
		{"part without a level", []change{{"points.csv", "Z,outlet", "Z,junction"}, {"pipes.csv", "P2,B,C", "P2,B,A"}, {"fittings.csv", "N1,P3,400,nozzle,50,0.05,,\n", ""}}, []string{
			`error: points.csv:5, point "C": the part of the system with C, Z has neither a reservoir nor an outlet, so its heads have no level to count from; join it to the rest in pipes.csv, or make one of its points a reservoir`,
		}},
		{"lonely point", []change{{"points.csv", "Z,outlet,100,1700,0,\n", "Z,outlet,100,1700,0,\nY,junction,90,0,0,\n"}}, []string{
			`error: points.csv:7, point "Y": no pipe and no machine leads to it; join it to the system in pipes.csv, or take it away`,
		}},
		{"two systems, one of them with an unknown end", []change{{"pipes.csv", "P2,B,C", "P2,B,A"}, {"pipes.csv", "P1,R,A", "P1,R,AX"}}, []string{
			`error: pipes.csv:2, to "AX": points.csv does not have it; did you mean A? If not, add AX to points.csv`,
		}},
		{"two systems", []change{{"pipes.csv", "P2,B,C", "P2,B,A"}}, []string{
			"notice: points.csv: the system falls into 2 parts that nothing joins: the one with R (3 points); the one with Z (2 points); add the pipe between them to pipes.csv if there is one",
		}},
	}},
}
