package ide

// Units by where a number stands. Only what every writer of decks agrees on is
// listed; elsewhere a number is shown without a unit.

// valueUnits are those of the value of an element, by its letter.
var valueUnits = map[byte]string{'r': "Ω", 'c': "F", 'l': "H", 'v': "V", 'i': "A", 'g': "S", 'h': "Ω"}

// elementUnits are those of an element's parameters.
var elementUnits = map[string]string{
	"w": "m", "l": "m", "pd": "m", "ps": "m", "ad": "m²", "as": "m²",
	"sa": "m", "sb": "m", "sd": "m", "delvto": "V",
	"r": "Ω", "c": "F", "dc": "V", "temp": "°C", "dtemp": "°C",
}

// modelUnits are those of the parameters of MOSFET, diode and resistor models,
// in the units of the card.
var modelUnits = map[string]string{
	"vto": "V", "vt0": "V", "vth0": "V", "kp": "A/V²", "gamma": "√V", "phi": "V", "lambda": "1/V",
	"tox": "m", "toxe": "m", "ld": "m", "wd": "m", "xj": "m", "lmin": "m", "lmax": "m", "wmin": "m", "wmax": "m",
	"rd": "Ω", "rs": "Ω", "rsh": "Ω/sq", "is": "A", "js": "A/m²", "pb": "V",
	"cbd": "F", "cbs": "F", "cj": "F/m²", "cjsw": "F/m", "cgso": "F/m", "cgdo": "F/m", "cgbo": "F/m",
	"uo": "cm²/Vs", "u0": "", "nsub": "cm⁻³", "nss": "cm⁻²", "nfs": "cm⁻²", "vmax": "m/s", "theta": "1/V",
	"tnom": "°C", "tref": "°C", "rsw": "Ω·µm", "vj": "V", "cjo": "F",
}

// optionUnits are those of `.option` values.
var optionUnits = map[string]string{"temp": "°C", "tnom": "°C", "gmin": "S", "abstol": "A", "vntol": "V", "reltol": ""}
