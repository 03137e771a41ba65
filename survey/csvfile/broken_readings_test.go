package csvfile

// brokenFolders: what stands wrong in a folder, and every problem that must be told of it.
var brokenFolders = []brokenGroup{
	{"readings", []broken{
		{"no value", []change{{"readings.csv", "1.62", "n/a"}}, []string{
			`set aside: readings.csv:2, reading "n/a": says that there is no value; read it again; if that is not possible nothing needs mending`,
		}},
		{"off the scale", []change{{"readings.csv", "1.62", "HI"}}, []string{
			`set aside: readings.csv:2, reading "HI": says that the instrument was off its scale or at fault; read it again with an instrument of the right range`,
		}},
		{"limit", []change{{"readings.csv", "1.62", "<0.5"}}, []string{
			`set aside: readings.csv:2, reading "<0.5": is a limit and not a value; read it again with an instrument of the right range`,
		}},
		{"sentinel", []change{{"readings.csv", "1.62", "9999"}}, []string{
			`set aside: readings.csv:2, reading "9999": is what instruments write for no reading; if it was read off the gauge, write it with one more decimal: 9999.0`,
		}},
		{"doubtful", []change{{"readings.csv", "1.62", "1.6?"}}, []string{
			`set aside: readings.csv:2, reading "1.6?": is a doubtful or rounded value; write the number that was read, or a range such as 5.4-5.6 in a reading`,
		}},
		{"empty", []change{{"readings.csv", "1.62", ""}}, []string{
			"set aside: readings.csv:2, reading: no reading is written; read it again, or take the row away",
		}},
		{"range", []change{{"readings.csv", "1.62", "5.4-5.6"}}, []string{
			`notice: readings.csv:2, reading "5.4-5.6": is a range; 5.5 was used, with half a range of 0.1 in its uncertainty`,
		}},
		{"range, other end first", []change{{"readings.csv", "1.62", "5.6 - 5.4"}}, []string{
			`set aside: readings.csv:2, reading "5.6 - 5.4": is a range whose second end is the smaller; write the smaller end first`,
		}},
		{"open point, other decimal commas", []change{{"readings.csv", "", "round;tap;kind;gauge;reading;unit\n1;T1;static;G1;1.620;bar\n2;T1;static;G1;1,62;bar\n"}}, []string{
			`error: readings.csv:2, reading "1.620": may be 1,620 or 1620, for other numbers of this file have decimal commas; write 1,620 or 1620`,
		}},
		{"ditto in the number", []change{{"readings.csv", "1.62", `"`}}, []string{
			`set aside: readings.csv:2, reading "\"": is a ditto mark, and this column holds numbers; write the number again`,
		}},
		{"blank unit", []change{{"readings.csv", "1.62,bar", "1.62,"}}, []string{
			"error: readings.csv:2, unit: no unit is written, and a unit is never guessed; units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf",
		}},
		{"unknown unit", []change{{"readings.csv", "1.62,bar", "1.62,barr"}}, []string{
			`error: readings.csv:2, unit "barr": is not a known unit of pressure; did you mean bar? units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf`,
		}},
		{"unit of another quantity", []change{{"readings.csv", "1.62,bar", "1.62,L/s"}}, []string{
			`error: readings.csv:2, unit "L/s": is a unit of flow (L/s), not of pressure; units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf`,
		}},
		{"absolute unit on a gauge above atmosphere", []change{{"readings.csv", "1.62,bar", "1.62,bar abs"}}, []string{
			`error: readings.csv:2, unit "bar abs": is an absolute pressure, but the gauge's kind says it reads above atmosphere; did you mean bar? units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf`,
		}},
		{"gauge unit on an absolute gauge", []change{{"readings.csv", "kPa abs", "kPa(g)"}}, []string{
			`error: readings.csv:3, unit "kPa(g)": is a pressure above atmosphere, but this one must be absolute; write kPa if it is; did you mean kPa? units of pressure are bar, kPa, psi, m, ft, mbar, MPa, Pa, kgf/cm2, atm, in, cm, mm, inHg, mmHg, Torr, psf`,
		}},
		{"unknown kind", []change{{"readings.csv", "T1,,static,G1,1.62", "T1,,statc,G1,1.62"}}, []string{
			`error: readings.csv:2, kind "statc": is not a known kind; did you mean static? The words are static, total, velocity, difference, flow, level, jet`,
		}},
		{"empty tap", []change{{"readings.csv", "2026-03-15 02:50,T1", "2026-03-15 02:50,"}}, []string{
			"error: readings.csv:2, tap: is empty, and every row needs it; write it in every row, also where it is the same as above",
		}},
		{"crew's remark", []change{{"readings.csv", "1.62,bar,0.4,,", "1.62,bar,0.4,,! cap leaking"}}, []string{
			`set aside: readings.csv:2, remark "! cap leaking": set aside by the crew's remark; take the ! away to have it used`,
		}},
		{"crew's remark on a bad row", []change{{"readings.csv", "1.62,bar,0.4,,", "n/a,,x,,! fell down"}}, []string{
			`set aside: readings.csv:2, remark "! fell down": set aside by the crew's remark; take the ! away to have it used`,
		}},
		{"ditto marks", []change{{"readings.csv", "1,2026-03-15 02:55,T2,,static,G2,510,kPa abs,,,", `",2026-03-15 02:55,T2,,do.,G2,510,kPa abs,,,"`}}, []string{
			`notice: readings.csv:3, kind "do.": is a ditto mark; it was read as the cell above`,
			`notice: readings.csv:3, remark "\"": is a ditto mark; it was read as the cell above`,
			`notice: readings.csv:3, round "\"": is a ditto mark; it was read as the cell above`,
		}},
		{"ditto in the first row", []change{{"readings.csv", "T1,,static,G1,1.62", "T1,,ditto,G1,1.62"}}, []string{
			`set aside: readings.csv:2, kind "ditto": is a ditto mark with no row above it; write the word itself`,
		}},
		{"same row in two files", []change{{"readings/crew-2.csv", "2026-03-15 11:05,T2,,static,G1,4.2,bar,0.3,,", "2026-03-15 10:20,T1,,static,G1,1.4,bar,0.400,,steady"}}, []string{
			"set aside: readings/crew-2.csv:3: is the same row as readings.csv:4, at the same time; take one of them away; if both were read, write their own times",
		}},
		{"same row in one file", []change{{"readings/crew-2.csv", "0.3,,", "0.3,,\n2,2026-03-15 11:05,T2,,static,G1,4.20,bar,0.3,,"}}, []string{
			`notice: readings/crew-2.csv:4, time "2026-03-15 11:05": the whole row stands in line 3 already; both were used as repeats; take one away if it is a copy`,
		}},
		{"row short of cells", []change{{"readings.csv", "1.62,bar,0.4,,", "1.62,bar"}}, []string{
			`set aside: readings.csv:2 "1,2026-03-15 02:50,T1,,static,G1,1.62,bar": has 8 cells under 11 headings; fill up or take away cells until the row fits the heading; an empty cell needs its delimiter too`,
		}},
	}},
	{"times", []broken{
		{"time of day alone", []change{{"readings.csv", "2026-03-15 02:50", "02:50"}}, []string{
			`set aside: readings.csv:2, time "02:50": is a time of day without a date; write it as 2026-03-15 14:05`,
		}},
		{"time of day with a dot", []change{{"readings.csv", "2026-03-15 02:50", "2.50"}}, []string{
			`set aside: readings.csv:2, time "2.50": is a time of day without a date; write it as 2026-03-15 14:05`,
		}},
		{"day first", []change{{"readings.csv", "2026-03-15 02:50", "15/03/26 02:50"}}, []string{
			`set aside: readings.csv:2, time "15/03/26 02:50": is in another order than year-month-day, and day and month may be changed over; write it as 2026-03-15 14:05`,
		}},
		{"date alone", []change{{"readings.csv", "2026-03-15 02:50", "2026-03-15"}}, []string{
			`set aside: readings.csv:2, time "2026-03-15": is a date without a time of day; write it as 2026-03-15 14:05`,
		}},
		{"day number", []change{{"readings.csv", "2026-03-15 02:50", "46096.118"}}, []string{
			`set aside: readings.csv:2, time "46096.118": looks like a spreadsheet's day number; format the column as a date with time of day, as 2026-03-15 14:05, before saving it as CSV`,
		}},
		{"no such hour", []change{{"readings.csv", "2026-03-15 02:50", "2026-03-15 24:00"}}, []string{
			`set aside: readings.csv:2, time "2026-03-15 24:00": is no date and time of day that exists; write it as 2026-03-15 14:05, hours from 00 to 23`,
		}},
		{"no such day", []change{{"readings.csv", "2026-03-15 02:50", "2026-02-30 02:50"}}, []string{
			`set aside: readings.csv:2, time "2026-02-30 02:50": is no date and time of day that exists; write it as 2026-03-15 14:05, hours from 00 to 23`,
		}},
		{"words", []change{{"readings.csv", "2026-03-15 02:50", "after lunch"}}, []string{
			`set aside: readings.csv:2, time "after lunch": is not a date with a time of day; write it as 2026-03-15 14:05`,
		}},
		{"ditto", []change{{"readings.csv", "2026-03-15 02:50", "do."}}, []string{
			`set aside: readings.csv:2, time "do.": is a ditto mark, and this column holds times; write the time again`,
		}},
		{"hour that does not exist", []change{{"rounds.csv", "2026-03-15 10:00,2026-03-15 12:00", "2026-03-29 01:30,2026-03-29 03:00"}}, []string{
			`notice: rounds.csv:3, start "2026-03-29 01:30": does not exist in Europe/London, for the clocks were put forward; it was read as 02:30 +01:00; write the time with its offset from UTC, as 2026-03-29T02:30+01:00`,
		}},
		{"hour that occurs twice", []change{{"rounds.csv", "2026-03-15 10:00,2026-03-15 12:00", "2026-10-25 01:30,2026-10-25 03:00"}}, []string{
			`notice: rounds.csv:3, start "2026-10-25 01:30": occurs twice in Europe/London, for the clocks were put back; the first was taken; write the time with its offset from UTC, as 2026-10-25T01:30+01:00`,
		}},
		{"bad time of a round", []change{{"rounds.csv", "2026-03-15 10:00", "15.3.2026 10:00"}}, []string{
			`error: rounds.csv:3, start "15.3.2026 10:00": is in another order than year-month-day, and day and month may be changed over; write it as 2026-03-15 14:05`,
		}},
		{"unknown zone", []change{{"survey.csv", "Europe/London", "Europe/Londn"}}, []string{
			`error: survey.csv:3, value "Europe/Londn": is not a known time zone; write an IANA name such as Europe/London or Australia/Perth, or UTC; Etc/GMT-1 is one hour ahead of UTC all year`,
		}},
		{"another name of UTC", []change{{"survey.csv", "Europe/London", "gmt"}}, nil},
		{"the machine's zone", []change{{"survey.csv", "Europe/London", "Local"}}, []string{
			`error: survey.csv:3, value "Local": is not the name of a time zone; write an IANA name such as Europe/London or Australia/Perth, or UTC; Etc/GMT-1 is one hour ahead of UTC all year`,
		}},
		{"unknown zone of a logger", []change{{"loggers.csv", "UTC", "BST"}}, []string{
			`error: loggers.csv:2, time_zone "BST": is not a known time zone; write an IANA name such as Europe/London or Australia/Perth, or UTC; Etc/GMT-1 is one hour ahead of UTC all year`,
		}},
	}},
	{"survey.csv", []broken{
		{"unknown item", []change{{"survey.csv", "latitude", "lattitude"}}, []string{
			`notice: survey.csv:5, item "lattitude": is not a known item, and was not read; did you mean latitude? the items are title, site, datum, time_zone, site_level, latitude, water_temperature, friction_law, as_new_year, false_alarm_rate, energy_price, currency, pump_efficiency, hours_per_year, flow_exceeded`,
		}},
		{"no unit", []change{{"survey.csv", "120,m", "120,"}}, []string{
			"error: survey.csv:4, unit: no unit is written, and a unit is never guessed; units of length are m, mm, cm, km, in, ft, US survey ft, yd, mi",
		}},
		{"unit of another dimension", []change{{"survey.csv", "120,m", "120,s"}}, []string{
			`error: survey.csv:4, unit "s": is a unit of duration (s), not of length; units of length are m, mm, cm, km, in, ft, US survey ft, yd, mi`,
		}},
		{"beyond bounds", []change{{"survey.csv", "54", "540"}}, []string{
			`error: survey.csv:5, value "540": latitude must be from -90 degrees to 90 degrees; correct the number or its unit`,
		}},
		{"per cent without its sign", []change{{"survey.csv", "%", ""}}, []string{
			`error: survey.csv:9, value "70": pump_efficiency must be from 0.01 to 1; correct the number or its unit`,
		}},
		{"price of no energy", []change{{"survey.csv", "GBP/kWh", "GBP"}}, []string{
			`error: survey.csv:8, unit "GBP": is not the unit of a price for energy; write it as GBP/kWh or EUR/MWh`,
		}},
		{"unknown law", []change{{"survey.csv", "darcy-weisbach", "darcy"}}, []string{
			`error: survey.csv:7, value "darcy": is not a known value; write one of darcy-weisbach, hazen-williams`,
		}},
		{"unit of words", []change{{"survey.csv", "darcy-weisbach,", "darcy-weisbach,m"}}, []string{
			`notice: survey.csv:7, unit "m": friction_law has no unit; this was not read; leave the cell empty`,
		}},
		{"item twice", []change{{"survey.csv", "deg", "deg\nlatitude,53,deg"}}, []string{
			`error: survey.csv:6, item "latitude": stands in line 5 already; give each its own name, or take one of the rows away`,
		}},
	}},
	{"files", []broken{
		{"missing table", []change{{"points.csv", "", ""}}, []string{
			"error: points.csv: the table is missing: it lists where pipes meet and end; write it; its headings are point, kind, elevation [m], x [m], y [m], note",
		}},
		{"missing table beside a workbook", []change{{"points.csv", "", ""}, {"points.xlsx", "", "PK"}}, []string{
			"error: points.csv: the table is missing: it lists where pipes meet and end; save points.xlsx as points.csv",
		}},
		{"misspelt table", []change{{"levels.csv", "", ""}, {"level.csv", "", "pipe\n"}}, []string{
			"notice: level.csv: is not the name of a table, and was not read; did you mean levels.csv? Then rename it",
		}},
		{"readings beside the folder", []change{{"readings_crew3.csv", "", "x\n"}}, []string{
			"notice: readings_crew3.csv: is not the name of a table, and was not read; put further readings into the folder readings",
		}},
		{"sheet in the folder of readings", []change{{"readings/crew 3.ods", "", "PK"}}, []string{
			"notice: readings/crew 3.ods: is not a CSV file, and was not read; save its sheet as CSV if it holds readings",
		}},
		{"no readings", []change{{"readings.csv", "", ""}, {"readings/crew-2.csv", "", ""}}, []string{
			"error: readings.csv: the table is missing: there is no reading in readings.csv or the folder readings; write it; its headings are round, time, tap, other_tap, kind, gauge, reading, unit, gauge_height [m], depth [mm], remark",
		}},
		{"no survey.csv", []change{{"survey.csv", "", ""}}, []string{
			"notice: survey.csv: the table is missing: times are read as UTC, water is at 10 C, the site at latitude 45 and sea level, friction by Darcy and Weisbach; write it; its headings are item, value, unit",
		}},
		{"two spellings of one table", []change{{"Levels.CSV", "", "pipe,at [m],elevation [m]\nP1,400,120\n"}}, []string{
			"error: levels.csv: is the same table as Levels.CSV by its name; keep one of them",
		}},
		{"empty", []change{{"taps.csv", "", "\n\n"}}, []string{
			"error: taps.csv: the file is empty; the headings of taps.csv are tap, pipe, at [m], point, elevation [m], elevation_sd [m], outlet_bore [mm], outlet_coefficient, note",
		}},
		{"empty, optional", []change{{"levels.csv", "", "\n\n"}}, []string{
			"notice: levels.csv: the file is empty; the headings of levels.csv are pipe, at [m], elevation [m]",
		}},
		{"heading alone", []change{{"taps.csv", "", "tap,pipe,at [m],point,elevation [m]\n"}}, []string{
			"error: taps.csv: the table has no rows: it lists where readings are taken; write its rows",
		}},
		{"no heading", []change{{"levels.csv", "", "P1,100,140\nP1,300,130\n"}}, []string{
			"error: levels.csv: no line of the first 200 has two known headings; the headings of levels.csv are pipe, at [m], elevation [m]",
		}},
		{"workbook", []change{{"levels.csv", "", "PK\u0003\u0004xxx"}}, []string{
			"error: levels.csv: is a workbook or an archive, not CSV text; save each sheet as CSV in UTF-8",
		}},
		{"binary", []change{{"levels.csv", "", "pipe,\u0000\u0001\u0002\u0000at\n"}}, []string{
			"error: levels.csv: holds NUL bytes, so it is not text; save it again as CSV in UTF-8",
		}},
		{"UTF-32", []change{{"levels.csv", "", "\xff\xfe\x00\x00p\x00\x00\x00"}}, []string{
			"error: levels.csv: is UTF-32 text, which is not read; save it again as CSV in UTF-8",
		}},
		{"half a letter", []change{{"levels.csv", "", "\xff\xfep\x00i"}}, []string{
			"error: levels.csv: is UTF-16 text cut off in the middle of a letter; save it again as CSV in UTF-8",
		}},
		{"broken UTF-8 with a mark", []change{{"levels.csv", "", "\xef\xbb\xbfpipe,at [m],elevation [m]\x0aB\xfcro,1,2\x0a"}}, []string{
			`error: levels.csv: begins with the mark of UTF-8, but line 2 is not UTF-8 ("B\xfcro,1,2"); save it again as CSV in UTF-8`,
		}},
		{"Windows-1252", []change{{"points.csv", "", "point,kind,elevation [m],note\x0aR,reservoir,150,\x0aA,junction,120,\x0aB,junction,118,Th\xf6ring Stra\xdfe\x0aC,junction,110,\x0aZ,outlet,100,\x0a"}}, []string{
			`notice: points.csv:4 "B,junction,118,Thöring Straße": the file is not UTF-8; it was read as Windows-1252, and this is the first line where that matters; look at the accents and degree signs; if they are wrong, save it again as CSV in UTF-8`,
		}},
		{"unknown code page", []change{{"levels.csv", "", "pipe,at [m],elevation [m]\x0aB\x81ro,1,2\x0a"}}, []string{
			"error: levels.csv: is text in an unknown code page: neither UTF-8 nor UTF-16 nor Windows-1252; save it again as CSV in UTF-8",
		}},
		{"lost letter", []change{{"points.csv", "500,0,", "500,0,B�ro"}}, []string{
			`notice: points.csv:3 "A,junction,120,500,0,B�ro": a letter was lost before the file came here, and stands as �; write the letter again; a name with � in it matches nothing`,
		}},
		{"lines above the heading", []change{{"levels.csv", "", "Mill Lane;;\nsurveyed 2019;;\npipe;at [m];elevation [m]\nP1;100;140\n"}}, []string{
			`notice: levels.csv:1 "Mill Lane": 2 lines above the heading were passed over, the last is line 2; put # before lines that are not part of the table`,
		}},
		{"heading once more", []change{{"levels.csv", "", "pipe,at [m],elevation [m]\nP1,100,140\npipe,at [m],elevation [m]\nP1,300,130\n"}}, []string{
			"notice: levels.csv:3: is the heading once more, and was passed over",
		}},
		{"quotation mark not closed", []change{{"points.csv", "500,0,", `500,0,"by the mill`}}, []string{
			"notice: points.csv:3: a quotation mark opens a cell that is not closed; it was taken as part of the text; take the mark away, or close the cell",
		}},
	}},
}
