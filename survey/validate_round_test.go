package survey_test

// roundCases are faults of what is read and stated: taps, gauges, rounds, conditions, readings,
// requirements.
var roundCases = []validateGroup{
	{"taps", []validateCase{
		{"unknown pipe", []change{{"taps.csv", "T1,P1", "T1,P1x"}}, []string{
			`error: taps.csv:2, pipe "P1x": pipes.csv does not have it; did you mean P1? If not, add P1x to pipes.csv`,
		}},
		{"unknown point", []change{{"taps.csv", "T2,,,C", "T2,,,CC"}}, []string{
			`error: taps.csv:3, point "CC": points.csv does not have it; did you mean C? If not, add CC to points.csv`,
		}},
		{"beyond its pipe", []change{{"taps.csv", "T1,P1,250", "T1,P1,2500"}}, []string{
			`error: taps.csv:2, at "2500 m": lies outside pipe P1, which is 500 m long; correct the distance, or the pipe's length`,
		}},
		{"pipe and point", []change{{"taps.csv", "T1,P1,250,", "T1,P1,250,A"}}, []string{
			`error: taps.csv:2, point "A": the tap states a pipe and a point; leave one of them empty`,
		}},
		{"neither pipe nor point", []change{{"taps.csv", "T2,,,C", "T2,,,"}}, []string{
			"error: taps.csv:3, pipe: the tap states neither a pipe nor a point; write the pipe and its place on it, or the point it is at",
		}},
		{"level in feet", []change{{"taps.csv", "250,,135", "250,,443"}}, []string{
			`notice: taps.csv:2, elevation "443 m": is far from the level of its place, 120 m to 150 m; look for feet and metres, and for two datums`,
		}},
		{"level of a point's tap in feet", []change{{"taps.csv", "C,110.5", "C,362.5"}}, []string{
			`notice: taps.csv:3, elevation "362.5 m": is far from the level of its place, 110 m; look for feet and metres, and for two datums`,
		}},
		{"uncertainty below nought", []change{{"taps.csv", "110.5,0.02", "110.5,-0.02"}}, []string{
			`error: taps.csv:3, elevation_sd "-0.02 m": is below nought; correct the sign`,
		}},
		{"very unsure level", []change{{"taps.csv", "110.5,0.02", "110.5,20"}}, []string{
			`notice: taps.csv:3, elevation_sd "20 m": is a very unsure level; the tap's readings then say next to nothing; look at the number and its unit`,
		}},
		{"outlet nought", []change{{"taps.csv", "63.5,0.9", "0,0"}}, []string{
			`error: taps.csv:5, outlet_bore "0 mm": must be above nought; correct the number`,
			`error: taps.csv:5, outlet_coefficient "0": must be above nought; correct the number`,
		}},
		{"unusual outlet", []change{{"taps.csv", "63.5,0.9", "6350,1.2"}}, []string{
			`notice: taps.csv:5, outlet_bore "6350 mm": is an unusual outlet; look at the number and its unit`,
			`notice: taps.csv:5, outlet_coefficient "1.2": is above 1, more than the opening could pass without loss; look at the number; smooth outlets have about 0.9`,
		}},
	}},
	{"gauges", []validateCase{
		{"ends of the scale changed over", []change{{"gauges.csv", "difference,0,50", "difference,50,0"}, {"readings.csv", "33.1", "60"}}, []string{
			"error: gauges.csv:4, high: gauge D1 has its high end at or below its low end; write the two ends of the scale",
		}},
		{"absolute below nought", []change{{"gauges.csv", "absolute-pressure,0", "absolute-pressure,-100"}}, []string{
			`error: gauges.csv:3, low "-100 kPa": an absolute pressure is never below nought; write 0, or the kind pressure if the gauge reads above atmosphere`,
		}},
		{"below a vacuum", []change{{"gauges.csv", "pressure,0,10,bar", "pressure,-10,10,bar"}}, []string{
			`error: gauges.csv:2, low "-1000 kPa": is below a vacuum; correct the number or its unit`,
		}},
		{"accuracy nought", []change{{"gauges.csv", "kPa,0.5,1", "kPa,0,1"}}, []string{
			`error: gauges.csv:3, accuracy "0 %": no gauge has such an accuracy; write the largest permissible error as per cent of span, such as 1.0 for class 1`,
		}},
		{"accuracy beyond the span", []change{{"gauges.csv", "kPa,0.5,1", "kPa,150,1"}}, []string{
			`error: gauges.csv:3, accuracy "150 %": no gauge has such an accuracy; write the largest permissible error as per cent of span, such as 1.0 for class 1`,
		}},
		{"poor accuracy", []change{{"gauges.csv", "kPa,0.5,1", "kPa,25,1"}}, []string{
			`notice: gauges.csv:3, accuracy "25 %": is a very poor accuracy; look at the number: it is per cent of span`,
		}},
		{"resolution nought", []change{{"gauges.csv", "kPa,0.5,1,", "kPa,0.5,0,"}}, []string{
			"error: gauges.csv:3, resolution: must be above nought; write the smallest step that can be read",
		}},
		{"coarse resolution", []change{{"gauges.csv", "kPa,0.5,1,", "kPa,0.5,200,"}}, []string{
			"notice: gauges.csv:3, resolution: is more than a tenth of the span of gauge G2; look at the number: it is the smallest step that can be read, in the gauge's unit",
		}},
		{"gain below nought", []change{{"gauges.csv", ",,,,1\n", ",,,,-1\n"}}, []string{
			`error: gauges.csv:5, gain_sd "-1 %": is below nought; correct the sign`,
		}},
		{"unsure meter", []change{{"gauges.csv", ",,,,1\n", ",,,,50\n"}}, []string{
			`notice: gauges.csv:5, gain_sd "50 %": is a very unsure meter; look at the number`,
		}},
		{"bench check in another unit", []change{{"gauge_checks.csv", "G1,10,10.05", "G1,10,1.05"}}, []string{
			"notice: gauge_checks.csv:3, indicated: gauge G1 was 90 % of its span off at this point; look at the unit, and whether applied and indicated are changed over",
		}},
	}},
	{"rounds", []validateCase{
		{"ends before it starts", []change{{"rounds.csv", "2026-03-15 04:10", "2026-03-14 04:10"}, {"readings.csv", "2026-03-15 02:5", "2026-03-15 02:5"}}, []string{
			`error: rounds.csv:2, end "2026-03-14 04:10": the round ends before it starts; correct the times; a time without an offset is in the survey's time_zone`,
		}},
		{"very long", []change{{"rounds.csv", "2026-03-15 12:00", "2026-03-17 12:00"}}, []string{
			`notice: rounds.csv:3, end "2026-03-17 12:00": the round lasts 50 hours; the flow must have been held steady all that time; look at the dates, or divide the round`,
		}},
		{"steam", []change{{"rounds.csv", "7.6", "176"}}, []string{
			`error: rounds.csv:2, water_temperature "176 C": is no temperature of liquid water in a pipe; correct the number or the unit in the heading`,
		}},
		{"ice", []change{{"rounds.csv", "7.6", "-7.6"}}, []string{
			`error: rounds.csv:2, water_temperature "-7.6 C": is no temperature of liquid water in a pipe; correct the number or the unit in the heading`,
		}},
		{"barometer in bar", []change{{"rounds.csv", "100.2", "1.002"}}, []string{
			`error: rounds.csv:3, barometer "1.002 kPa": is no pressure of the atmosphere; correct the number or the unit in the heading; it is absolute, about 101 kPa at the sea`,
		}},
		{"reservoir without a level", []change{{"conditions.csv", "*,R,level,152.3,m,0.01\n", ""}}, []string{
			`error: points.csv:2, point "R": reservoir R has no level in rounds 1, 2; add rows with condition level to conditions.csv; leave the value empty to have it estimated`,
		}},
		{"reservoir without a level in one round", []change{{"conditions.csv", "*,R,level", "2,R,level"}}, []string{
			`error: points.csv:2, point "R": reservoir R has no level in round 1; add rows with condition level to conditions.csv; leave the value empty to have it estimated`,
		}},
	}},
	{"conditions", []validateCase{
		{"unknown round", []change{{"conditions.csv", "2,C,draw", "20,C,draw"}}, []string{
			`error: conditions.csv:5, round "20": rounds.csv does not have it; did you mean 2? If not, add 20 to rounds.csv`,
		}},
		{"unknown point", []change{{"conditions.csv", "2,C,draw", "2,CC,draw"}}, []string{
			`error: conditions.csv:5, item "CC": points.csv does not have it; did you mean C? If not, add CC to points.csv`,
		}},
		{"unknown machine", []change{{"conditions.csv", "2,M1,speed", "2,M11,speed"}}, []string{
			`error: conditions.csv:4, item "M11": machines.csv does not have it; did you mean M1? If not, add M11 to machines.csv`,
		}},
		{"draw-off of a pipe", []change{{"conditions.csv", "2,C,draw", "2,P1,draw"}}, []string{
			`error: conditions.csv:5, item "P1": is a pipe, and draw-off is said of a point; correct the item or the condition`,
		}},
		{"speed of a point", []change{{"conditions.csv", "2,M1,speed", "2,C,speed"}}, []string{
			`error: conditions.csv:4, item "C": is a point, and speed is said of a machine; correct the item or the condition`,
		}},
		{"shut point", []change{{"conditions.csv", "1,M1,stopped", "1,A,shut"}}, []string{
			`error: conditions.csv:3, item "A": is a point, and shut is said of a pipe or a fitting; correct the item or the condition`,
		}},
		{"stopped pipe", []change{{"conditions.csv", "1,M1,stopped", "1,P1,stopped"}}, []string{
			`error: conditions.csv:3, item "P1": is a pipe, and stopped is said of a machine; correct the item or the condition`,
		}},
		{"level of a junction", []change{{"conditions.csv", "2,C,draw-off,4.5,L/s,0.1", "2,C,level,4.5,m,0.1"}}, []string{
			`error: conditions.csv:5, item "C": is of kind junction, and only a reservoir has a water level of its own; correct the item, or its kind in points.csv; a level that was measured is a reading`,
		}},
		{"draw-off at a reservoir", []change{{"conditions.csv", "2,C,draw", "2,R,draw"}}, []string{
			`error: conditions.csv:5, item "R": is of kind reservoir, where a draw-off changes nothing; write it at a junction, or take the row away`,
		}},
		{"draw-off at an outlet", []change{{"conditions.csv", "2,C,draw", "2,Z,draw"}}, []string{
			`error: conditions.csv:5, item "Z": is of kind outlet, where a draw-off changes nothing; write it at a junction, or take the row away`,
		}},
		{"name of two things", []change{{"pipes.csv", "P2,B,C", "B,B,C"}, {"taps.csv", "Q1,P2", "Q1,B"}, {"requirements.csv", "most,P2", "most,B"}}, []string{
			`error: conditions.csv:6, item "B": means two things: a point and a pipe (points.csv:4, pipes.csv:3); give them different names`,
		}},
		{"uncertainty below nought", []change{{"conditions.csv", "4.5,L/s,0.1", "4.5,L/s,-0.1"}}, []string{
			"error: conditions.csv:5, sd: is below nought; correct the sign",
		}},
		{"speed nought", []change{{"conditions.csv", "speed,1450", "speed,0"}}, []string{
			"error: conditions.csv:4, value: a speed must be above nought; write the condition stopped for a machine at rest",
		}},
		{"speed of a machine without a rated one", []change{{"machines.csv", "pump,1480", "pump,"}}, []string{
			`error: conditions.csv:4, item "M1": its rated speed is not stated, so its works curve cannot be brought to this speed; write the speed of the works curve in machines.csv`,
		}},
		{"level below the reservoir", []change{{"conditions.csv", "level,152.3", "level,15.23"}}, []string{
			`notice: conditions.csv:2, value "15.23 m": the water stands below the reservoir's own level, 150 m; look at the two numbers and their datum`,
		}},
		{"level twice", []change{{"conditions.csv", "*,R,level,152.3,m,0.01", "*,R,level,152.3,m,0.01\n*,R,level,152.4,m,0.01"}}, []string{
			`error: conditions.csv:3, item "R": its level in this round is stated in line 2 already; take one of the rows away`,
		}},
		{"level for all rounds and for one", []change{{"conditions.csv", "*,R,level,152.3,m,0.01", "*,R,level,152.3,m,0.01\n1,R,level,152.4,m,0.01"}}, nil},
		{"draw-offs that add", []change{{"conditions.csv", "2,C,draw-off,4.5,L/s,0.1", "2,C,draw-off,4.5,L/s,0.1\n2,C,draw-off,1.5,L/s,0.1"}}, nil},
		{"draw-off copied", []change{{"conditions.csv", "2,C,draw-off,4.5,L/s,0.1", "2,C,draw-off,4.5,L/s,0.1\n2,C,draw-off,4.5,L/s,0.1"}}, []string{
			`notice: conditions.csv:6, item "C": the same draw-off as in line 5 of the same round; both count; take one of them away if it is a copy`,
		}},
		{"shut and open", []change{{"conditions.csv", "1,M1,stopped,,", "1,P3,shut,,,\n1,P3,open,,"}}, []string{
			`error: conditions.csv:4, condition "open": P3 is shut in the same round by line 3; take one of the rows away`,
		}},
		{"stopped at a speed", []change{{"conditions.csv", "1,M1,stopped", "2,M1,stopped"}}, []string{
			`error: conditions.csv:4, condition "speed": M1 is stopped in the same round by line 3; take one of the rows away`,
		}},
	}},
	{"readings", []validateCase{
		{"unknown round", []change{{"readings.csv", "1,2026-03-15 02:50", "3,2026-03-15 02:50"}}, []string{
			`error: readings.csv:2, round "3": rounds.csv does not have it; add 3 to rounds.csv, or correct the name`,
		}},
		{"unknown tap", []change{{"readings.csv", "02:50,T1", "02:50,T11"}}, []string{
			`error: readings.csv:2, tap "T11": taps.csv does not have it; did you mean T1? If not, add T11 to taps.csv`,
		}},
		{"unknown gauge", []change{{"readings.csv", "static,G1,1.62", "static,G7,1.62"}}, []string{
			`error: readings.csv:2, gauge "G7": gauges.csv does not have it; did you mean G1? If not, add G7 to gauges.csv`,
		}},
		{"below a vacuum without a gauge", []change{{"readings.csv", "static,G1,1.62", "static,,-1.62"}}, []string{
			`error: readings.csv:2, reading "-1.62": is below a vacuum; correct the number or its unit`,
		}},
		{"wrong kind of gauge", []change{{"readings.csv", "static,G1,1.62", "static,D1,0.162"}}, []string{
			`error: readings.csv:2, gauge "D1": gauge D1 is of kind difference and cannot show a reading of kind static; correct the gauge's number or the kind of the reading`,
		}},
		{"flow on a gauge for pressure", []change{{"readings.csv", "flow,F1,21.5", "flow,G1,21.5"}}, []string{
			`error: readings.csv:5, gauge "G1": gauge G1 is of kind pressure and cannot show a reading of kind flow; correct the gauge's number or the kind of the reading`,
		}},
		{"off the scale", []change{{"readings.csv", "G1,1.62", "G1,16.2"}}, []string{
			`notice: readings.csv:2, reading "16.2": is off the scale of gauge G1, 0 to 10 bar; look at the number, its unit and the gauge's number`,
		}},
		{"just off the scale", []change{{"readings.csv", "F1,21.5", "F1,-0.1"}}, nil},
		{"below a vacuum", []change{{"readings.csv", "G1,1.62", "G1,-1.62"}}, []string{
			`error: readings.csv:2, reading "-1.62": is below a vacuum; correct the number or its unit`,
		}},
		{"absolute below nought", []change{{"readings.csv", "G2,510", "G2,-3"}}, []string{
			`error: readings.csv:3, reading "-3": an absolute pressure is never below nought; correct the number, or the kind of the gauge if it reads above atmosphere`,
		}},
		{"difference without the other tap", []change{{"readings.csv", "T1,T2,diff", "T1,,diff"}}, []string{
			"error: readings.csv:6, other_tap: a difference needs the tap it was taken from; write the tap on the low side of the gauge",
		}},
		{"difference of one tap", []change{{"readings.csv", "T1,T2,diff", "T1,T1,diff"}}, []string{
			`error: readings.csv:6, other_tap "T1": is the same tap on both sides of the gauge; write the tap on the low side of the gauge`,
		}},
		{"difference from an unknown tap", []change{{"readings.csv", "T1,T2,diff", "T1,TX2,diff"}}, []string{
			`error: readings.csv:6, other_tap "TX2": taps.csv does not have it; did you mean T2? If not, add TX2 to taps.csv`,
		}},
		{"other tap of a static reading", []change{{"readings.csv", "02:50,T1,", "02:50,T1,T2"}}, []string{
			`notice: readings.csv:2, other_tap "T2": a reading of kind static has one tap; this was not used; leave it empty, or write the kind difference`,
		}},
		{"depth beyond the bore", []change{{"readings.csv", ",,100,", ",,200,"}}, []string{
			`error: readings.csv:7, depth "200 mm": is not within the bore of pipe P1, 200 mm; write its distance from the near wall; look at the unit in the heading`,
		}},
		{"depth nought", []change{{"readings.csv", ",,100,", ",,0,"}}, []string{
			`error: readings.csv:7, depth "0 mm": an opening at the wall meets no flow; write its distance from the near wall, or leave it empty for the centreline`,
		}},
		{"depth of a static reading", []change{{"readings.csv", "1.40,bar,0.4,", "1.40,bar,0.4,50"}}, []string{
			`notice: readings.csv:4, depth "50 mm": a reading of kind static has no depth; this was not used; leave it empty, or write the kind total or velocity`,
		}},
		{"depth at a point's tap", []change{{"readings.csv", "10:50,T1,,velocity,D1,0.9,kPa,,100", "10:50,T2,,velocity,D1,0.9,kPa,,160"}}, []string{
			`error: readings.csv:7, depth "160 mm": is not within the bore of pipe P2, 150 mm; write its distance from the near wall; look at the unit in the heading`,
		}},
		{"long gauge line", []change{{"readings.csv", "1.62,bar,0.4", "1.62,bar,140"}}, []string{
			`notice: readings.csv:2, gauge_height "140 m": is a very long gauge line; look at the number and its unit: it is the height above the tap and not above the datum`,
		}},
		{"velocity backwards", []change{{"readings.csv", "D1,0.9", "D1,-0.02"}}, []string{
			`notice: readings.csv:7, reading "-0.02": a velocity head below nought: the opening did not face the flow; look whether the two lines of the gauge were changed over`,
		}},
		{"level on a pipe", []change{{"gauges.csv", "F1,flow,0,40,L/s,0.5,0.1,,,,1", "F1,flow,0,40,L/s,0.5,0.1,,,,1\nL1,level,0,10,m,0.5,0.01,,,,"}, {"readings.csv", "static,G1,1.62,bar", "level,L1,1.62,m"}}, []string{
			`notice: readings.csv:2, tap "T1": a water level read at a tap that is on a pipe; put the tap at the point that has the water surface`,
		}},
		{"flow at a meeting of pipes", []change{{"readings.csv", "10:30,Q1", "10:30,T2"}}, []string{
			`notice: readings.csv:5, tap "T2": a flow read at point C, where several pipes meet: it counts for the widest one; put the tap on the pipe whose flow was read`,
		}},
		{"outside its round", []change{{"readings.csv", "02:50", "22:50"}}, []string{
			`notice: readings.csv:2, time "2026-03-15 22:50": was taken outside round 1, 2026-03-15 02:40 to 2026-03-15 04:10; look at the time, the round and the time zone`,
		}},
		{"several outside their round", []change{{"rounds.csv", "2026-03-15 10:00,2026-03-15 12:00", "2026-03-16 10:00,2026-03-16 12:00"}}, []string{
			`notice: readings.csv:4, time "2026-03-15 10:20": and 3 more in this file were taken outside round 2, 2026-03-16 10:00 to 2026-03-16 12:00; look at the time, the round and the time zone`,
			`notice: readings/crew-2.csv:2, time "2026-03-15 11:00": and 1 more in this file were taken outside round 2, 2026-03-16 10:00 to 2026-03-16 12:00; look at the time, the round and the time zone`,
		}},
		{"after a round without an end", []change{{"rounds.csv", "2026-03-15 10:00,2026-03-15 12:00", ",2026-03-15 10:45"}}, []string{
			`notice: readings.csv:7, time "2026-03-15 10:50": was taken outside round 2, up to 2026-03-15 10:45; look at the time, the round and the time zone`,
			`notice: readings/crew-2.csv:2, time "2026-03-15 11:00": and 1 more in this file were taken outside round 2, up to 2026-03-15 10:45; look at the time, the round and the time zone`,
		}},
		{"round unread", []change{{"rounds.csv", "2,2026", "3,,,,,\n2,2026"}, {"conditions.csv", "*,R,level", "3,M1,stopped,,,\n*,R,level"}}, []string{
			`notice: rounds.csv:3, round "3": rounds without a reading in use: 3; look at the rounds of the readings, and at what was set aside`,
		}},
		{"all set aside", []change{{"readings.csv", "", "round,tap,kind,gauge,reading,unit,remark\n1,T1,static,G1,1.6,bar,! no\n2,T1,static,G1,1.6,bar,! no\n"}, {"readings/crew-2.csv", "", ""}}, []string{
			"error: readings.csv: no reading can be used; mend what was set aside",
			`notice: rounds.csv:2, round "1": rounds without a reading in use: 1, 2; look at the rounds of the readings, and at what was set aside`,
		}},
	}},
	{"requirements", []validateCase{
		{"unknown place", []change{{"requirements.csv", "most,T1,T2", "most,T1x,T2"}}, []string{
			`error: requirements.csv:2, item "T1x": taps.csv or points.csv does not have it; did you mean T1? If not, add T1x to taps.csv or points.csv`,
		}},
		{"no second place", []change{{"requirements.csv", "most,T1,T2", "most,T1,"}}, []string{
			"error: requirements.csv:2, to: a loss is from one place to another; write the tap or point where the stretch ends",
		}},
		{"one place twice", []change{{"requirements.csv", "most,T1,T2", "most,T1,T1"}}, []string{
			`error: requirements.csv:2, to "T1": the stretch begins and ends at one place; write the tap or point where it ends`,
		}},
		{"point for a tap", []change{{"requirements.csv", "most,T1,T2", "most,R,C"}}, nil},
		{"name of two places", []change{{"taps.csv", "T2,,,C", "A,,,C"}, {"readings.csv", "T2", "A"}, {"readings/crew-2.csv", "T2", "A"}, {"requirements.csv", "T1,T2", "T1,A"}, {"requirements.csv", "least,T2", "least,A"}}, []string{
			`error: requirements.csv:2, to "A": means two places: a tap (taps.csv:3) and a point (points.csv:3); give them different names`,
			`error: requirements.csv:3, item "A": means two places: a tap (taps.csv:3) and a point (points.csv:3); give them different names`,
		}},
		{"second place of a pressure", []change{{"requirements.csv", "least,T2,", "least,T2,T1"}}, []string{
			`notice: requirements.csv:3, to "T1": pressure-at-least has one place; this was not used; leave it empty`,
		}},
		{"unknown pipe", []change{{"requirements.csv", "most,P2", "most,P22"}}, []string{
			`error: requirements.csv:4, item "P22": pipes.csv does not have it; did you mean P2? If not, add P22 to pipes.csv`,
		}},
		{"unknown fitting", []change{{"requirements.csv", "A3,roughness-at-most,P2,,,0.1,mm", "A3,k-at-most,V7,,,0.3,"}}, []string{
			`error: requirements.csv:4, item "V7": fittings.csv does not have it; did you mean V1? If not, add V7 to fittings.csv`,
		}},
		{"duty of an unknown machine", []change{{"requirements.csv", "A3,roughness-at-most,P2,,,0.1,mm", "A3,duty,M7,,20,30,m"}}, []string{
			`error: requirements.csv:4, item "M7": machines.csv does not have it; did you mean M1? If not, add M7 to machines.csv`,
		}},
		{"duty without a flow", []change{{"requirements.csv", "A3,roughness-at-most,P2,,,0.1,mm", "A3,duty,M1,,,30,m"}}, []string{
			"error: requirements.csv:4, at_flow: a duty is a head at a flow; write the flow of the guarantee",
		}},
		{"other friction law", []change{{"requirements.csv", "A3,roughness-at-most,P2,,,0.1,mm", "A3,c-at-least,P2,,,120,"}}, []string{
			`notice: requirements.csv:4, kind "c-at-least": the survey's friction law is darcy-weisbach, which has no such coefficient; change friction_law in survey.csv, or the requirement`,
		}},
		{"flow nought", []change{{"requirements.csv", "T2,20,12", "T2,0,12"}}, []string{
			"error: requirements.csv:2, at_flow: must be above nought; correct the number",
		}},
		{"limit nought", []change{{"requirements.csv", ",0.1,mm", ",0,mm"}}, []string{
			"error: requirements.csv:4, limit: must be above nought; correct the number",
		}},
		{"limit below nought", []change{{"requirements.csv", "20,12,m", "20,-12,m"}}, []string{
			"error: requirements.csv:2, limit: is below nought; correct the number",
		}},
		{"channel of an unknown tap and gauge", []change{{"loggers.csv", "T1,static,G1", "T11,static,G9"}}, []string{
			`error: loggers.csv:2, tap "T11": taps.csv does not have it; did you mean T1? If not, add T11 to taps.csv`,
			`error: loggers.csv:2, gauge "G9": gauges.csv does not have it; did you mean G1? If not, add G9 to gauges.csv`,
		}},
	}},
}
