package csvfile

// brokenTables: what stands wrong in a folder, and every problem that must be told of it.
var brokenTables = []brokenGroup{
	{"headings", []broken{
		{"no unit", []change{{"pipes.csv", "length [m]", "length"}}, []string{
			"error: pipes.csv:1, length: has no unit, and a unit is never guessed; write it in the heading, as length [m]",
		}},
		{"units in a row below", []change{{"pipes.csv", "length [m],bore [mm],material,laid,roughness [mm],c_value,group,note,spread", "length,bore,material,laid,roughness [mm],c_value,group,note,spread\n,,,[m],mm,,,,,,,"}}, []string{
			"error: pipes.csv:1, length: has no unit, and a unit is never guessed; the unit stands in the row below the heading; write it in the heading, as length [m], and take that row away",
			"error: pipes.csv:1, bore: has no unit, and a unit is never guessed; the unit stands in the row below the heading; write it in the heading, as bore [mm], and take that row away",
			"error: pipes.csv:2, pipe: is empty, and every row needs it; write it in every row, also where it is the same as above",
			"error: pipes.csv:2, from: is empty, and every row needs it; write it in every row, also where it is the same as above",
			"error: pipes.csv:2, to: is empty, and every row needs it; write it in every row, also where it is the same as above",
		}},
		{"unit of another dimension", []change{{"pipes.csv", "length [m]", "length [bar]"}}, []string{
			`error: pipes.csv:1, length [bar]: unit "bar" is a unit of pressure (bar), not of length; units of length are m, mm, cm, km, in, ft, US survey ft, yd, mi`,
		}},
		{"unknown unit", []change{{"pipes.csv", "bore [mm]", "bore [mmm]"}}, []string{
			`error: pipes.csv:1, bore [mmm]: unit "mmm" is not a known unit of length; did you mean mm? units of length are m, mm, cm, km, in, ft, US survey ft, yd, mi`,
		}},
		{"unknown column", []change{{"pipes.csv", "group", "grupe"}}, []string{
			"notice: pipes.csv:1, grupe: the heading is not known; the column was not read; the headings of pipes.csv are pipe, from, to, length [m], bore [mm], material, laid, roughness [mm], c_value, group, note, spread",
		}},
		{"missing column of units", []change{{"readings.csv", "unit", "uint"}}, []string{
			`error: readings.csv:1, unit: the column is missing; did you mean it by "uint"? Write unit`,
			"notice: readings.csv:1, uint: the heading is not known; the column was not read; the nearest known heading is unit",
		}},
		{"unknown column, nothing near", []change{{"pipes.csv", "group", "colour of lid"}}, []string{
			"notice: pipes.csv:1, colour of lid: the heading is not known; the column was not read; the headings of pipes.csv are pipe, from, to, length [m], bore [mm], material, laid, roughness [mm], c_value, group, note, spread",
		}},
		{"doubled heading", []change{{"pipes.csv", "material", "Diameter [mm]"}}, []string{
			`error: pipes.csv:1, Diameter [mm]: a second heading for bore, beside "bore [mm]"; take one of the two columns away, or give it another heading`,
		}},
		{"missing column", []change{{"pipes.csv", "bore [mm]", "wall [mm]"}}, []string{
			"error: pipes.csv:1, bore: the column is missing; add it; the headings of pipes.csv are pipe, from, to, length [m], bore [mm], material, laid, roughness [mm], c_value, group, note, spread",
			"notice: pipes.csv:1, wall [mm]: the heading is not known; the column was not read; the headings of pipes.csv are pipe, from, to, length [m], bore [mm], material, laid, roughness [mm], c_value, group, note, spread",
		}},
		{"missing column, misspelt", []change{{"pipes.csv", "length [m]", "lenght [m]"}}, []string{
			`error: pipes.csv:1, length: the column is missing; did you mean it by "lenght [m]"? Write length [m]`,
			"notice: pipes.csv:1, lenght [m]: the heading is not known; the column was not read; the nearest known heading is length [m]",
		}},
		{"column without a heading", []change{{"pipes.csv", "material", ""}}, []string{
			`notice: pipes.csv:1 "cast iron": column 6 holds values but has no heading; it was not read; give it a heading, or take it away`,
		}},
		{"unit where words stand", []change{{"points.csv", "kind", "kind [m]"}}, []string{
			`error: points.csv:1, kind [m]: has the unit "m", but it holds words; take the unit out of the heading`,
		}},
		{"unit where each row has its own", []change{{"readings.csv", "reading", "reading [bar]"}}, []string{
			`error: readings.csv:1, reading [bar]: has the unit "bar" in the heading, but each row states its own; write the unit into the column unit of every row, and take it out of the heading`,
		}},
		{"unit of a time", []change{{"readings.csv", "time", "time [UTC]"}}, []string{
			`error: readings.csv:1, time [UTC]: has "UTC" in brackets, but a time has no unit; state the zone as time_zone in survey.csv, or write each time with its offset`,
		}},
		{"unit of a plain number", []change{{"pipes.csv", "c_value", "c_value [mm]"}}, []string{
			`error: pipes.csv:1, c_value [mm]: has the unit "mm", but it is a plain number; take the unit out of the heading`,
		}},
		{"absolute barometer marked as gauge", []change{{"rounds.csv", "barometer [kPa]", "barometer [kPag]"}}, []string{
			`error: rounds.csv:1, barometer [kPag]: unit "kPag" is a pressure above atmosphere, but this one must be absolute; write kPa if it is; did you mean kPa? units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf`,
		}},
	}},
	{"rows", []broken{
		{"too few cells", []change{{"pipes.csv", "old,,", "old"}}, []string{
			`error: pipes.csv:2 "P1,R,A,500,200,cast iron,1950,1.5,,old": has 10 cells under 12 headings; fill up or take away cells until the row fits the heading; an empty cell needs its delimiter too`,
		}},
		{"too many cells", []change{{"pipes.csv", "500", "5,00"}}, []string{
			`error: pipes.csv:2 "P1,R,A,5,00,200,cast iron,1950,1.5,,old,,": has 13 cells under 12 headings; put text that has a comma into quotation marks; where numbers have decimal commas, save the table with semicolons`,
		}},
		{"too many cells, semicolons", []change{{"levels.csv", "", "pipe;at [m];elevation [m]\nP1;100;140;3\nP1;200;139;;\n"}}, []string{
			`error: levels.csv:2 "P1;100;140;3": has 4 cells under 3 headings; fill up or take away cells until the row fits the heading; an empty cell needs its delimiter too`,
			`error: levels.csv:3 "P1;200;139;;": has 5 cells under 3 headings; fill up or take away cells until the row fits the heading; an empty cell needs its delimiter too`,
		}},
		{"empty number", []change{{"pipes.csv", "200", ""}}, []string{
			"error: pipes.csv:2, bore [mm]: is empty, and a number is needed here; write the number",
		}},
		{"empty name", []change{{"pipes.csv", "P1", ""}}, []string{
			"error: pipes.csv:2, pipe: is empty, and every row needs it; write it in every row, also where it is the same as above",
		}},
		{"empty end", []change{{"pipes.csv", "R", ""}}, []string{
			"error: pipes.csv:2, from: is empty, and every row needs it; write it in every row, also where it is the same as above",
		}},
		{"name twice", []change{{"pipes.csv", "P2", "P1"}}, []string{
			`error: pipes.csv:3, pipe "P1": stands in line 2 already; give each its own name, or take one of the rows away`,
		}},
		{"unknown kind", []change{{"points.csv", "reservoir", "resevoir"}}, []string{
			`error: points.csv:2, kind "resevoir": is not a known kind; did you mean reservoir? The words are junction, reservoir, outlet`,
		}},
		{"empty kind", []change{{"points.csv", "reservoir", ""}}, []string{
			"error: points.csv:2, kind: is empty, and every row needs it; write one of junction, reservoir, outlet",
		}},
		{"tap on a pipe without a place", []change{{"taps.csv", "250", ""}}, []string{
			"error: taps.csv:2, at [m]: the tap is on a pipe but does not say where; write its distance from the pipe's from end",
		}},
		{"tap at a point with a distance", []change{{"taps.csv", ",,C", ",3,C"}}, []string{
			`notice: taps.csv:3, at [m] "3": the tap is at a point, so this was not used; leave it empty, or write the pipe instead of the point`,
		}},
		{"round of all names", []change{{"rounds.csv", "1,2026-03-15 02:40", "*,2026-03-15 02:40"}}, []string{
			`error: rounds.csv:2, round "*": stands for all rounds in conditions.csv and cannot name one; give the round a name`,
		}},
		{"speed without a value", []change{{"conditions.csv", "1450", ""}}, []string{
			"error: conditions.csv:4, value: is empty, and a number is needed here; write the number",
		}},
		{"shut with a value", []change{{"conditions.csv", "stopped,", "stopped,1"}}, []string{
			`notice: conditions.csv:3, value "1": stopped needs no value; this was not used; leave it empty, or correct the condition`,
		}},
		{"uncertainty of nothing", []change{{"conditions.csv", "draw-off,,L/s,", "draw-off,,L/s,0.3"}}, []string{
			`notice: conditions.csv:6, sd "0.3": is the uncertainty of a value that is not stated; it was not used; leave it empty, or write the value`,
		}},
		{"bench check of an unknown gauge", []change{{"gauge_checks.csv", "G1,0", "G01,0"}}, []string{
			`error: gauge_checks.csv:2, gauge "G01": gauges.csv does not have it; did you mean G1? If not, add G01 to gauges.csv`,
		}},
		{"bench check marked as absolute on a gauge above atmosphere", []change{{"gauge_checks.csv", "0.02,bar", "0.02,bar abs"}}, []string{
			`error: gauge_checks.csv:2, unit "bar abs": is an absolute pressure, but the gauge's kind says it reads above atmosphere; did you mean bar? units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf`,
		}},
		{"bench check of an absolute gauge", []change{{"gauge_checks.csv", "G1,0,0.02,bar", "G2,0,0.02,bar abs"}}, nil},
		{"duty of an unknown machine", []change{{"duty.csv", "M1,0", "X7,0"}}, []string{
			`error: duty.csv:2, machine "X7": machines.csv does not have it; add it to machines.csv, or correct the name`,
		}},
		{"channel twice", []change{{"loggers.csv", "UTC,", "UTC,\nch1,east.csv,T2,static,G1,bar,-90,,\nch1,west.csv,T2,static,G1,bar,-90,,"}}, []string{
			`error: loggers.csv:3, channel "ch1": stands in line 2 already, for the same file; take one of the rows away`,
		}},
	}},
	{"numbers", []broken{
		{"letters", []change{{"pipes.csv", "500", "5oo"}}, []string{
			`error: pipes.csv:2, length [m] "5oo": has "oo" behind the number; write the number alone; the unit goes into the heading or the column unit`,
		}},
		{"computer notation", []change{{"pipes.csv", "500", "5_00"}}, []string{
			`error: pipes.csv:2, length [m] "5_00": is a number in computer notation; write a plain decimal number`,
		}},
		{"hexadecimal", []change{{"pipes.csv", "500", "0x1F4"}}, []string{
			`error: pipes.csv:2, length [m] "0x1F4": is a number in computer notation; write a plain decimal number`,
		}},
		{"not a number", []change{{"pipes.csv", "500", "NaN"}}, []string{
			`error: pipes.csv:2, length [m] "NaN": is not a number; leave the cell empty where nothing is known`,
		}},
		{"infinite", []change{{"pipes.csv", "500", "Inf"}}, []string{
			`error: pipes.csv:2, length [m] "Inf": is not a number; leave the cell empty where nothing is known`,
		}},
		{"too large", []change{{"pipes.csv", "500", "1e999"}}, []string{
			`error: pipes.csv:2, length [m] "1e999": is too large a number; correct it`,
		}},
		{"unit in the cell", []change{{"pipes.csv", "500", "500 m"}}, []string{
			`error: pipes.csv:2, length [m] "500 m": has "m" behind the number; write the number alone; the unit goes into the heading or the column unit`,
		}},
		{"date from a spreadsheet", []change{{"pipes.csv", "500", "10-Sep"}}, []string{
			`error: pipes.csv:2, length [m] "10-Sep": looks like a date: a spreadsheet may have made one of a number such as 9.10; write the number again from the field sheet; the spreadsheet may have changed its size as well`,
		}},
		{"date from a spreadsheet, numbers", []change{{"pipes.csv", "500", "9/10"}}, []string{
			`error: pipes.csv:2, length [m] "9/10": looks like a date: a spreadsheet may have made one of a number such as 9.10; write the number again from the field sheet; the spreadsheet may have changed its size as well`,
		}},
		{"date in full", []change{{"pipes.csv", "500", "2026-09-10"}}, []string{
			`error: pipes.csv:2, length [m] "2026-09-10": looks like a date: a spreadsheet may have made one of a number such as 9.10; write the number again from the field sheet; the spreadsheet may have changed its size as well`,
		}},
		{"time of day", []change{{"pipes.csv", "500", "5:00"}}, []string{
			`error: pipes.csv:2, length [m] "5:00": looks like a time of day; write the number again from the field sheet`,
		}},
		{"no value", []change{{"pipes.csv", "1.5", "n/a"}}, []string{
			`error: pipes.csv:2, roughness [mm] "n/a": says that there is no value; leave the cell empty where nothing is known`,
		}},
		{"stroke", []change{{"pipes.csv", "1.5", "-"}}, []string{
			`error: pipes.csv:2, roughness [mm] "-": says that there is no value; leave the cell empty where nothing is known`,
		}},
		{"spreadsheet error", []change{{"pipes.csv", "1.5", "#REF!"}}, []string{
			`error: pipes.csv:2, roughness [mm] "#REF!": is a spreadsheet's error mark; mend the formula, or leave the cell empty`,
		}},
		{"formula", []change{{"pipes.csv", "1.5", "=A1/2"}}, []string{
			`error: pipes.csv:2, roughness [mm] "=A1/2": is a formula and not its result; paste the values into the sheet before saving it as CSV`,
		}},
		{"range", []change{{"pipes.csv", "500", "490-510"}}, []string{
			`error: pipes.csv:2, length [m] "490-510": is a range; only a reading may be one; write one number`,
		}},
		{"station", []change{{"pipes.csv", "500", "5+00"}}, []string{
			`error: pipes.csv:2, length [m] "5+00": is a station in hundreds of feet; write it as one number, as 1250 for 12+50`,
		}},
		{"ditto", []change{{"pipes.csv", "500", `"`}}, []string{
			`error: pipes.csv:2, length [m] "\"": is a ditto mark, and this column holds numbers; write the number again`,
		}},
		{"decimal comma between commas", []change{{"pipes.csv", "1.5", `"1,5"`}}, []string{
			`error: pipes.csv:2, roughness [mm] "1,5": has a decimal comma in a comma-separated table; write decimal points, or save the table with semicolons between the cells`,
		}},
		{"thousands or decimal comma between commas", []change{{"pipes.csv", "500", `"1,500"`}}, []string{
			`error: pipes.csv:2, length [m] "1,500": may be 1.500 or 1500; write it without a comma`,
		}},
		{"clear thousands between commas", []change{{"pipes.csv", "500", `"1,500.0"`}}, []string{
			`notice: pipes.csv:2, length [m] "1,500.0": has marks between its thousands; they were taken out; write numbers without them`,
		}},
		{"open comma, nothing else to go by", []change{{"taps.csv", "", "tap;pipe;at [m];point;elevation [m];elevation_sd [m]\nT1;P1;250;;1,135;\n"}}, []string{
			`error: taps.csv:2, elevation [m] "1,135": may be 1.135 or 1135; write 1.135 or 1135`,
		}},
		{"open comma, other decimal points", []change{{"taps.csv", "", "tap;pipe;at [m];point;elevation [m];elevation_sd [m]\nT1;P1;250;;1,135;\nT2;;;C;110.5;0.02\n"}}, []string{
			`error: taps.csv:2, elevation [m] "1,135": may be 1.135 or 1135, and other numbers of this file have decimal points; write 1.135 or 1135`,
		}},
		{"open point, other decimal commas", []change{{"taps.csv", "", "tap;pipe;at [m];point;elevation [m];elevation_sd [m]\nT1;P1;250;;1.135;\nT2;;;C;110,5;0,02\n"}}, []string{
			`error: taps.csv:2, elevation [m] "1.135": may be 1,135 or 1135, for other numbers of this file have decimal commas; write 1,135 or 1135`,
		}},
		{"open point, nothing else to go by", []change{{"levels.csv", "", "pipe;at [m];elevation [m]\nP1;100;1.140\n"}}, []string{
			`notice: levels.csv "1.140": was read as a decimal number; nothing in the file says whether its point is for thousands; write numbers without thousands marks`,
		}},
		{"both marks, each clear", []change{{"taps.csv", "", "tap;pipe;at [m];point;elevation [m];elevation_sd [m]\nT1;P1;250;;135.5;\nT2;;;C;110,5;0,02\n"}}, []string{
			"notice: taps.csv: numbers of this file have decimal points in some rows and decimal commas in others; each was read by its own mark; use one decimal mark in a file",
		}},
		{"thousands marks against the decimal mark", []change{{"taps.csv", "", "tap;pipe;at [m];point;elevation [m];elevation_sd [m]\nT1;P1;1,000,250;;135,5;\n"}}, []string{
			`error: taps.csv:2, at [m] "1,000,250": uses ',' for thousands, which is the decimal mark of other numbers of this file; write numbers without thousands marks`,
		}},
		{"clear thousands", []change{{"taps.csv", "", "tap;pipe;at [m];point;elevation [m];elevation_sd [m]\nT1;P1;1 250,5;;1.135,5;\nT2;;;C;110,5;0,02\n"}}, []string{
			`notice: taps.csv:2, at [m] "1 250,5": has marks between its thousands; they were taken out; write numbers without them`,
			`notice: taps.csv:2, elevation [m] "1.135,5": has marks between its thousands; they were taken out; write numbers without them`,
		}},
	}},
}
