package unit

import "math"

// The defined constants every other factor is formed from [SI], [SP811].
const (
	inch        = 0.0254                   // m
	foot        = 12 * inch                // m
	yard        = 3 * foot                 // m
	mile        = 1760 * yard              // m
	pound       = 0.45359237               // kg
	gravity     = 9.80665                  // m/s2, standard
	usGallon    = 231 * inch * inch * inch // m3
	impGallon   = 4.54609e-3               // m3
	cubicFoot   = foot * foot * foot       // m3
	waterColumn = 1000 * gravity           // Pa/m, conventional
	mercury     = 13595.1 * gravity        // Pa/m, conventional
	minute      = 60
	hour        = 3600
	day         = 86400
)

// Units by name. A name says the quantity where two dimensions share the word.
var (
	One  = Unit{Name: "", Dimension: Count, Factor: 1}
	Year = Unit{Name: "year", Dimension: Count, Factor: 1}

	Bar                 = Unit{Name: "bar", Dimension: Pressure, Factor: 1e5}
	Kilopascal          = Unit{Name: "kPa", Dimension: Pressure, Factor: 1e3}
	PoundPerSquareInch  = Unit{Name: "psi", Dimension: Pressure, Factor: pound * gravity / (inch * inch)}
	MetreOfWater        = Unit{Name: "m", Dimension: Pressure, Factor: waterColumn}
	FootOfWater         = Unit{Name: "ft", Dimension: Pressure, Factor: waterColumn * foot}
	Millibar            = Unit{Name: "mbar", Dimension: Pressure, Factor: 100}
	Megapascal          = Unit{Name: "MPa", Dimension: Pressure, Factor: 1e6}
	Pascal              = Unit{Name: "Pa", Dimension: Pressure, Factor: 1}
	KilogramForcePerCm2 = Unit{Name: "kgf/cm2", Dimension: Pressure, Factor: gravity * 1e4}
	Atmosphere          = Unit{Name: "atm", Dimension: Pressure, Factor: 101325}
	InchOfWater         = Unit{Name: "in", Dimension: Pressure, Factor: waterColumn * inch}
	CentimetreOfWater   = Unit{Name: "cm", Dimension: Pressure, Factor: waterColumn / 100}
	MillimetreOfWater   = Unit{Name: "mm", Dimension: Pressure, Factor: waterColumn / 1000}
	InchOfMercury       = Unit{Name: "inHg", Dimension: Pressure, Factor: mercury * inch}
	MillimetreOfMercury = Unit{Name: "mmHg", Dimension: Pressure, Factor: mercury / 1000}
	Torr                = Unit{Name: "Torr", Dimension: Pressure, Factor: 101325.0 / 760}
	PoundPerSquareFoot  = Unit{Name: "psf", Dimension: Pressure, Factor: pound * gravity / (foot * foot)}

	Metre      = Unit{Name: "m", Dimension: Length, Factor: 1}
	Millimetre = Unit{Name: "mm", Dimension: Length, Factor: 1e-3}
	Centimetre = Unit{Name: "cm", Dimension: Length, Factor: 1e-2}
	Kilometre  = Unit{Name: "km", Dimension: Length, Factor: 1e3}
	Inch       = Unit{Name: "in", Dimension: Length, Factor: inch}
	Foot       = Unit{Name: "ft", Dimension: Length, Factor: foot}
	SurveyFoot = Unit{Name: "US survey ft", Dimension: Length, Factor: 1200.0 / 3937} // retired end of 2022
	Yard       = Unit{Name: "yd", Dimension: Length, Factor: yard}
	Mile       = Unit{Name: "mi", Dimension: Length, Factor: mile}

	LitrePerSecond          = Unit{Name: "L/s", Dimension: Flow, Factor: 1e-3}
	CubicMetrePerHour       = Unit{Name: "m3/h", Dimension: Flow, Factor: 1.0 / hour}
	CubicMetrePerSecond     = Unit{Name: "m3/s", Dimension: Flow, Factor: 1}
	LitrePerMinute          = Unit{Name: "L/min", Dimension: Flow, Factor: 1e-3 / minute}
	LitrePerHour            = Unit{Name: "L/h", Dimension: Flow, Factor: 1e-3 / hour}
	CubicMetrePerMinute     = Unit{Name: "m3/min", Dimension: Flow, Factor: 1.0 / minute}
	CubicMetrePerDay        = Unit{Name: "m3/d", Dimension: Flow, Factor: 1.0 / day}
	MegalitrePerDay         = Unit{Name: "Ml/d", Dimension: Flow, Factor: 1000.0 / day}
	GallonPerMinute         = Unit{Name: "gpm", Dimension: Flow, Factor: usGallon / minute}
	ImperialGallonPerMinute = Unit{Name: "imp gpm", Dimension: Flow, Factor: impGallon / minute}
	GallonPerDay            = Unit{Name: "gpd", Dimension: Flow, Factor: usGallon / day}
	MillionGallonPerDay     = Unit{Name: "MGD", Dimension: Flow, Factor: 1e6 * usGallon / day}
	ImperialMillionGallon   = Unit{Name: "imp MGD", Dimension: Flow, Factor: 1e6 * impGallon / day}
	CubicFootPerSecond      = Unit{Name: "ft3/s", Dimension: Flow, Factor: cubicFoot}
	CubicFootPerMinute      = Unit{Name: "ft3/min", Dimension: Flow, Factor: cubicFoot / minute}
	AcreFootPerDay          = Unit{Name: "acre-ft/d", Dimension: Flow, Factor: 43560 * cubicFoot / day}

	MetrePerSecond = Unit{Name: "m/s", Dimension: Velocity, Factor: 1}
	FootPerSecond  = Unit{Name: "ft/s", Dimension: Velocity, Factor: foot}

	Celsius    = Unit{Name: "C", Dimension: Temperature, Factor: 1}
	Fahrenheit = Unit{Name: "F", Dimension: Temperature, Factor: 1 / 1.8, Offset: -32}
	Kelvin     = Unit{Name: "K", Dimension: Temperature, Factor: 1, Offset: -273.15}

	RPM                 = Unit{Name: "rpm", Dimension: Rotation, Factor: 2 * math.Pi / minute}
	RevolutionPerSecond = Unit{Name: "Hz", Dimension: Rotation, Factor: 2 * math.Pi}
	RadianPerSecond     = Unit{Name: "rad/s", Dimension: Rotation, Factor: 1}

	Percent = Unit{Name: "%", Dimension: Fraction, Factor: 0.01}
	Ratio   = Unit{Name: "1", Dimension: Fraction, Factor: 1}

	Degree = Unit{Name: "deg", Dimension: Angle, Factor: 1}
	Radian = Unit{Name: "rad", Dimension: Angle, Factor: 180 / math.Pi}

	Second = Unit{Name: "s", Dimension: Duration, Factor: 1}
	Minute = Unit{Name: "min", Dimension: Duration, Factor: minute}
	Hour   = Unit{Name: "h", Dimension: Duration, Factor: hour}
	Day    = Unit{Name: "d", Dimension: Duration, Factor: day}

	Watt             = Unit{Name: "W", Dimension: Power, Factor: 1}
	Kilowatt         = Unit{Name: "kW", Dimension: Power, Factor: 1e3}
	Megawatt         = Unit{Name: "MW", Dimension: Power, Factor: 1e6}
	Horsepower       = Unit{Name: "hp", Dimension: Power, Factor: 550 * foot * pound * gravity}
	MetricHorsepower = Unit{Name: "PS", Dimension: Power, Factor: 75 * gravity}
)

// entry ties a unit to its spellings, each as fold leaves it. The unit's own
// name is accepted without being listed.
type entry struct {
	unit Unit
	also []string
}

// table is in the order in which a message lists the units: the usual ones of
// the trade first.
var table = []entry{
	{One, []string{"-", "1"}},
	{Year, []string{"years", "yr", "a"}},

	{Bar, []string{"bars", "barg", "bargauge"}},
	{Kilopascal, []string{"kpag", "kpagauge", "kn/m2", "kilopascal", "kilopascals"}},
	{PoundPerSquareInch, []string{"psig", "psigauge", "lb/in2", "lbf/in2", "lb/sqin", "lbf/sqin", "lbs/in2", "poundspersquareinch"}},
	{MetreOfWater, []string{"mh2o", "mwc", "mwg", "mws", "mca", "mce", "mwater", "mofwater", "metre", "meter", "metres", "meters", "metresofwater", "metersofwater", "mhead", "mofhead"}},
	{FootOfWater, []string{"fth2o", "ftwc", "ftwg", "ftwater", "ftofwater", "feet", "foot", "feetofwater", "footofwater", "fthead", "ftofhead"}},
	{Millibar, []string{"mbarg", "millibar", "millibars", "hpa"}},
	{Megapascal, []string{"mpag", "n/mm2", "megapascal", "megapascals"}},
	{Pascal, []string{"pag", "n/m2", "pascal", "pascals"}},
	{KilogramForcePerCm2, []string{"kg/cm2", "kp/cm2", "kgf/cm2g", "kg/cm2g", "ksc", "at", "technicalatmosphere"}},
	{Atmosphere, []string{"atmosphere", "atmospheres", "standardatmosphere"}},
	{InchOfWater, []string{"inh2o", "inwc", "inwg", "inwater", "inofwater", "inch", "inches", "inchesofwater", "inchh2o"}},
	{CentimetreOfWater, []string{"cmh2o", "cmwc", "cmwg", "cmwater", "cmofwater"}},
	{MillimetreOfWater, []string{"mmh2o", "mmwc", "mmwg", "mmws", "mmca", "mmce", "mmwater", "mmofwater"}},
	{InchOfMercury, []string{"inchhg", "inofmercury", "inchesofmercury", "inmercury"}},
	{MillimetreOfMercury, []string{"mmofmercury", "mmmercury"}},
	{Torr, nil},
	{PoundPerSquareFoot, []string{"lb/ft2", "lbf/ft2"}},

	{Metre, []string{"metre", "meter", "metres", "meters"}},
	{Millimetre, []string{"millimetre", "millimeter", "millimetres", "millimeters"}},
	{Centimetre, []string{"centimetre", "centimeter", "centimetres", "centimeters"}},
	{Kilometre, []string{"kilometre", "kilometer", "kilometres", "kilometers"}},
	{Inch, []string{"inch", "inches", `"`}},
	{Foot, []string{"foot", "feet", "'"}},
	{SurveyFoot, []string{"ussurveyfoot", "ussurveyfeet", "surveyft", "surveyfoot", "surveyfeet", "usft", "ftus"}},
	{Yard, []string{"yard", "yards"}},
	{Mile, []string{"mile", "miles"}},

	{LitrePerSecond, []string{"lps", "l/sec", "litre/s", "litres/s", "liter/s", "liters/s", "litres/second", "liters/second", "litre/second", "liter/second", "dm3/s", "ls-1"}},
	{CubicMetrePerHour, []string{"m3h", "m3/hr", "m3/hour", "cmh", "cum/h", "cum/hr", "m3h-1", "cubicmetres/hour", "cubicmeters/hour"}},
	{CubicMetrePerSecond, []string{"m3/sec", "m3/second", "cms", "cumec", "cumecs", "m3s-1", "cubicmetres/second", "cubicmeters/second"}},
	{LitrePerMinute, []string{"lpm", "litre/min", "litres/min", "liter/min", "liters/min", "litres/minute", "liters/minute", "l/minute"}},
	{LitrePerHour, []string{"lph", "l/hr", "l/hour", "litres/h", "liters/h", "litres/hour", "liters/hour"}},
	{CubicMetrePerMinute, []string{"m3/minute"}},
	{CubicMetrePerDay, []string{"m3/day", "cmd", "cubicmetres/day", "cubicmeters/day"}},
	{MegalitrePerDay, []string{"mld", "ml/day", "mlpd", "megalitre/day", "megalitres/day", "megaliter/day", "megaliters/day"}},
	{GallonPerMinute, []string{"usgpm", "gpmus", "gal/min", "usgal/min", "galus/min", "usg/min", "usgal/minute", "usgallons/minute", "gallons/minute"}},
	{ImperialGallonPerMinute, []string{"igpm", "imperialgpm", "ukgpm", "gpmimp", "gpmimperial", "gpmuk", "impgal/min", "imperialgal/min", "imperialgallons/minute", "ukgal/min", "igal/min"}},
	{GallonPerDay, []string{"usgpd", "gal/d", "gal/day", "usgal/d", "usgal/day"}},
	{MillionGallonPerDay, []string{"usmgd", "mgdus", "mgal/d", "mgal/day", "milliongallons/day"}},
	{ImperialMillionGallon, []string{"imgd", "migd", "imperialmgd", "ukmgd", "mgdimp", "mgduk"}},
	{CubicFootPerSecond, []string{"cfs", "ft3/sec", "ft3/second", "cuft/s", "cuft/sec", "cusec", "cusecs", "cubicfeet/second", "second-feet"}},
	{CubicFootPerMinute, []string{"cfm", "ft3/minute", "cuft/min"}},
	{AcreFootPerDay, []string{"acre-feet/day", "acre-ft/day", "acft/d", "ac-ft/d", "ac-ft/day", "acreft/d"}},

	{MetrePerSecond, []string{"mps", "m/sec", "metres/second", "meters/second", "ms-1"}},
	{FootPerSecond, []string{"fps", "ft/sec", "feet/second", "feet/s"}},

	{Celsius, []string{"degc", "celsius", "centigrade", "degreesc", "degcelsius", "degreescelsius"}},
	{Fahrenheit, []string{"degf", "fahrenheit", "degreesf", "degfahrenheit", "degreesfahrenheit"}},
	{Kelvin, []string{"degk", "kelvin", "kelvins"}},

	{RPM, []string{"rev/min", "r/min", "revs/min", "u/min", "1/min", "min-1", "tr/min", "revolutions/minute"}},
	{RevolutionPerSecond, []string{"rev/s", "r/s", "rps", "1/s", "s-1", "rev/sec"}},
	{RadianPerSecond, []string{"rad/sec", "radians/second"}},

	{Percent, []string{"percent", "pct", "pc"}},
	{Ratio, []string{"-", "fraction", "ratio"}},

	{Degree, []string{"degree", "degrees"}},
	{Radian, []string{"radian", "radians"}},

	{Second, []string{"sec", "secs", "second", "seconds"}},
	{Minute, []string{"mins", "minute", "minutes"}},
	{Hour, []string{"hr", "hrs", "hour", "hours"}},
	{Day, []string{"day", "days"}},

	{Watt, []string{"watt", "watts"}},
	{Kilowatt, []string{"kilowatt", "kilowatts"}},
	{Megawatt, []string{"megawatt", "megawatts"}},
	{Horsepower, []string{"bhp", "horsepower"}},
	{MetricHorsepower, []string{"cv", "metrichp", "hpmetric"}},
}
