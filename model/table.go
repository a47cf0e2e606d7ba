package model

// hoppingKey is the parameter that defines the unit t of a chain in eV.
const hoppingKey = "electrons.hopping"

// params is the table of parameters, in the order of a chain file.
var params = []Param{
	{
		Key: "title", Symbol: "title", ASCII: "title", Kind: Text,
		Doc:   "what this chain is called",
		field: func(c *Chain) any { return &c.Title },
	},
	{
		Key: "source", Symbol: "source", ASCII: "source", Kind: Text,
		Doc:   `where the values are published, or "invented"`,
		field: func(c *Chain) any { return &c.Source },
	},
	{
		Key: "energy", Symbol: "unit", ASCII: "unit", Kind: Word, Words: []string{UnitHopping.String(), UnitEV.String()},
		Doc:      `what energies are counted in, "t" for multiples of a hopping or "eV" with lengths in Å; changing it converts no number`,
		field:    func(c *Chain) any { return &c.Energy },
		required: true,
	},
	{
		Key: "chain.sites", Symbol: "N", ASCII: "N", Kind: Whole,
		Doc:      "number of sites",
		field:    func(c *Chain) any { return &c.Sites },
		least:    1,
		upper:    func(Chain) float64 { return MaxSites },
		step:     stepSites,
		required: true,
	},
	{
		Key: "chain.boundary", Symbol: "ends", ASCII: "ends", Kind: Word, Words: []string{Ring.String(), Open.String()},
		Doc:   "whether the last site is bonded to the first; left out: a ring",
		field: func(c *Chain) any { return &c.Boundary },
		step:  stepBoundary,
	},
	{
		Key: "chain.spacing", Symbol: "a", ASCII: "a", Kind: Number, dim: length,
		Doc:   "lattice constant, which turns wave vectors into 1/Å; 0 or left out: not given",
		field: func(c *Chain) any { return &c.Spacing },
		step:  stepNumber(1, false),
		sign:  "a length has no sign",
	},
	{
		Key: hoppingKey, Symbol: "t", ASCII: "t", Kind: Number, dim: energy,
		Doc:      "nearest-neighbour hopping of the undistorted chain",
		field:    func(c *Chain) any { return &c.Hopping },
		step:     stepNumber(0.01, false),
		sign:     "its sign only shifts every wave vector by π",
		required: true,
	},
	{
		Key: "electrons.next_hopping", Symbol: "t2", ASCII: "t2", Kind: Number, dim: energy,
		Doc:    "hopping to the second neighbour, which the lattice does not change",
		field:  func(c *Chain) any { return &c.NextHopping },
		step:   stepNumber(0.01, true),
		signed: true,
	},
	{
		Key: "electrons.spin", Symbol: "g_s", ASCII: "g_s", Kind: Whole,
		Doc:   "spin states per level, 1 for spinless electrons; left out: 2",
		field: func(c *Chain) any { return &c.Spin },
		least: 1,
		upper: func(Chain) float64 { return 2 },
		step:  stepSpin,
	},
	{
		Key: "electrons.filling", Symbol: "ν", ASCII: "nu", Kind: Number,
		Doc:     "electrons per site; the finite chain holds the nearest whole number of electrons",
		field:   func(c *Chain) any { return &c.Filling },
		given:   func(c Chain) bool { return !c.ByNumber },
		choose:  func(c *Chain) { c.ByNumber, c.Electrons = false, 0 },
		derived: Chain.ElectronsPerSite,
		upper:   func(c Chain) float64 { return float64(c.Spin) },
		step:    stepFilling,
	},
	{
		Key: "electrons.electrons", Symbol: "N_e", ASCII: "N_e", Kind: Whole,
		Doc:     "number of electrons on the whole chain, in place of a filling",
		field:   func(c *Chain) any { return &c.Electrons },
		given:   func(c Chain) bool { return c.ByNumber },
		choose:  func(c *Chain) { c.ByNumber, c.Filling = true, 0 },
		derived: func(c Chain) float64 { n, _ := c.Count(); return float64(n) },
		upper:   func(c Chain) float64 { return float64(c.Spin) * float64(c.Sites) },
		step:    stepElectrons,
	},
	coupling("bond_phonon", "α", "alpha", force, bondPhonon, "how fast a hopping falls as its bond is stretched"),
	stiffness("bond_phonon", "K", "K", spring, bondPhonon, "spring constant of a bond"),
	frequency("bond_phonon", "ħω_b", "hw_b", bondPhonon, "ħω of the bare mode at the zone boundary, 2ħ√(K/M); 0 or left out: masses not given, static answers only"),
	coupling("site_phonon", "g", "g", energy, sitePhonon, "how fast a site energy rises with the local mode"),
	stiffness("site_phonon", "K_s", "K_s", energy, sitePhonon, "spring constant of the local mode"),
	frequency("site_phonon", "ħω_s", "hw_s", sitePhonon, "ħω of the bare local mode; 0 or left out: masses not given, static answers only"),
	{
		Key: "conditions.temperature", Symbol: "T", ASCII: "T", Kind: Number, dim: energy,
		Doc:   "temperature as the energy k_B T; left out: 0",
		field: func(c *Chain) any { return &c.Temperature },
		step:  stepNumber(0.01, true),
		sign:  "temperatures start at absolute zero",
	},
}

// tableDocs are the headings of a chain file and what stands under them.
var tableDocs = []struct{ name, doc string }{
	{"chain", ""},
	{"electrons", ""},
	{"bond_phonon", "lattice motion changes the hopping"},
	{"site_phonon", "a local mode shifts the site energy"},
	{"conditions", ""},
}

func bondPhonon(c *Chain) *Phonon { return &c.Bond }
func sitePhonon(c *Chain) *Phonon { return &c.Site }

// ofPhonon completes the row of one number of a phonon branch.
func ofPhonon(p Param, branch func(*Chain) *Phonon, number func(*Phonon) *float64) Param {
	p.Kind = Number
	p.field = func(c *Chain) any { return number(branch(c)) }
	p.given = func(c Chain) bool { return branch(&c).Present }
	p.choose = func(c *Chain) { branch(c).Present = true }
	return p
}

func coupling(table, symbol, ascii string, dim dimension, branch func(*Chain) *Phonon, doc string) Param {
	return ofPhonon(Param{
		Key: table + ".coupling", Symbol: symbol, ASCII: ascii, Doc: doc, dim: dim, required: true,
		step: stepNumber(0.1, true), sign: "its sign only decides what is called a positive displacement",
	}, branch, func(ph *Phonon) *float64 { return &ph.Coupling })
}

func stiffness(table, symbol, ascii string, dim dimension, branch func(*Chain) *Phonon, doc string) Param {
	return ofPhonon(Param{
		Key: table + ".stiffness", Symbol: symbol, ASCII: ascii, Doc: doc, dim: dim, required: true,
		step: stepNumber(MinMagnitude, false), positive: true, sign: "without a spring the lattice would collapse",
	}, branch, func(ph *Phonon) *float64 { return &ph.Stiffness })
}

func frequency(table, symbol, ascii string, branch func(*Chain) *Phonon, doc string) Param {
	return ofPhonon(Param{
		Key: table + ".frequency", Symbol: symbol, ASCII: ascii, Doc: doc, dim: energy,
		step: stepNumber(0.01, true), sign: "an unstable bare lattice cannot be described",
	}, branch, func(ph *Phonon) *float64 { return &ph.Frequency })
}
