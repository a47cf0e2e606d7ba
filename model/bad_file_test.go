package model

import (
	"errors"
	"regexp"
	"strings"
	"testing"
)

// Beginnings of a good file, so that each bad one is bad in one respect.
const (
	energyHead    = "energy = \"eV\"\n"
	chainHead     = energyHead + "[chain]\nsites = 100\n"
	electronsHead = chainHead + "[electrons]\nhopping = 2.5\nfilling = 1\n"
)

// badFiles are mistakes in chain files and the whole message for each.
var badFiles = []struct{ mistake, file, want string }{
	{"nothing at all", "",
		`c.toml: there is nothing in it; a chain file needs at least energy, chain.sites, electrons.hopping and electrons.filling`},
	{"binary junk", "\x00\x01\x02\xff",
		`c.toml:1:1: the byte 0x00 is not UTF-8 text, which a chain file is`},
	{"a zip file", "PK\x03\x04\x14\x00",
		`c.toml:1:6: the byte 0x00 is not UTF-8 text, which a chain file is`},
	{"text in another encoding", "title = \"caf\xe9\"\n",
		`c.toml:1:13: the byte 0xe9 is not UTF-8 text, which a chain file is`},
	{"UTF-16", "\xff\xfee\x00n\x00",
		`c.toml:1:1: the byte 0xff is not UTF-8 text, which a chain file is`},
	{"a JSON object", "{\"energy\": \"eV\"}\n",
		`c.toml:1:1: a key is made of letters, digits and underscores, such as next_hopping`},
	{"a colon for an equals sign", "energy: \"eV\"\n",
		`c.toml:1:7: after a key comes "=" and then its value`},
	{"a key alone", "title\n",
		`c.toml:1:6: after a key comes "=" and then its value`},
	{"an equals sign alone", "= \"eV\"\n",
		`c.toml:1:1: the key is missing before the equals sign`},
	{"no value", "energy =\n",
		`c.toml:1:9: the value is missing after the equals sign`},
	{"no value at the end of the file", "energy =",
		`c.toml:1:8: the file ends where a value should follow the equals sign`},
	{"a word without quotes", "energy = eV\n",
		`c.toml:1:10: a value is a number, or text in double quotes such as "ring"`},
	{"a word like true", "energy = t\n",
		`c.toml:1:10: this word is no value; text stands in double quotes, such as "ring"`},
	{"typographic quotes", "energy = “eV”\n",
		`c.toml:1:10: typographic quotes and signs are not TOML; write text in plain " and a minus as -`},
	{"an unfinished text", "energy = \"eV\n",
		`c.toml:1:13: the text that begins on this line lacks its closing quote`},
	{"an unfinished text in apostrophes", "energy = 'eV\n",
		`c.toml:1:13: the text that begins on this line lacks its closing apostrophe`},
	{"a text unfinished at the end", "energy = \"eV",
		`c.toml:1:12: the file ends inside a text; close its quotes`},
	{"a long text unfinished", "title = \"\"\"eV\n",
		`c.toml:1:14: the file ends inside a text of several lines; close its three quotes`},
	{"a bad escape", "title = \"C:\\qubit\"\n",
		`c.toml:1:12: after a backslash only \b \t \n \f \r \e \" \\ \x41 \u0041 or \U00000041 may follow; for a backslash itself write two`},
	{"a control character in a text", "title = \"a\x01b\"\n",
		`c.toml:1:11: a text cannot hold a control character as it is; write it as \u0001`},
	{"a control character in a comment", "# a\x01b\n",
		`c.toml:1:4: a comment cannot hold a control character`},
	{"an unfinished heading", "[chain\n",
		`c.toml:1:7: the heading of a table ends in ], such as [chain]`},
	{"a heading without a name", "[]\n",
		`c.toml:1:2: a heading needs a name, such as [chain]`},
	{"a heading with too few brackets", "[[chain]\n",
		`c.toml:1:8: a heading stands in single brackets, such as [chain]`},
	{"a heading for a list of tables", "[[chain]]\nsites = 4\n",
		`c.toml:1:3: chain must be a table, written [chain] on a line of its own with its keys below, not a list`},
	{"an unfinished list", "title = [1,\n",
		`c.toml:1:12: the file ends inside a list; no parameter takes a list`},
	{"an unfinished table in braces", "chain = { sites = 4\n",
		`c.toml:1:20: the file ends inside a table; close its brace`},
	{"a key of two dots", "chain..sites = 4\n",
		`c.toml:1:7: a key is made of letters, digits and underscores, such as next_hopping`},
	{"an unquoted unit", electronsHead + "[conditions]\ntemperature = 300 K\n",
		`c.toml:8:19: more follows after the value; a number with a unit is text in double quotes, such as "300 K"`},
	{"two values on a line", energyHead + "[chain]\nsites = 100 200\n",
		`c.toml:3:13: more follows after the value; a number with a unit is text in double quotes, such as "300 K"`},
	{"a decimal comma", chainHead + "[electrons]\nhopping = 2,5\n",
		`c.toml:5:12: a number has a decimal point, not a comma`},
	{"a bare decimal point", chainHead + "[electrons]\nhopping = .5\n",
		`c.toml:5:11: a number does not begin with a point; write 0.5`},
	{"a bare point at the end", chainHead + "[electrons]\nhopping = 2.\n",
		`c.toml:5:13: a digit comes after the decimal point; write 1.0`},
	{"a leading zero", energyHead + "[chain]\nsites = 0100\n",
		`c.toml:3:9: a number does not begin with a zero before another digit`},
	{"an underscore at the end", energyHead + "[chain]\nsites = 100_\n",
		`c.toml:3:12: an underscore in a number stands between two digits`},
	{"a sign alone", chainHead + "[electrons]\nhopping = +\n",
		`c.toml:5:12: after the sign comes a number`},
	{"a sign at the end of the file", chainHead + "[electrons]\nhopping = -",
		`c.toml:5:11: the file ends where a number should follow the sign`},
	{"an exponent without digits", chainHead + "[electrons]\nhopping = 1e\n",
		`c.toml:5:13: a digit comes after the e; write 1e3`},
	{"an integer beyond 64 bits", energyHead + "[chain]\nsites = 99999999999999999999\n",
		`c.toml:3:9: this whole number is far too large for any parameter`},
	{"a float beyond the largest", chainHead + "[electrons]\nhopping = 1e999\n",
		`c.toml:5:11: this number is far too large for any parameter`},
	{"an impossible date", "title = 2024-13-45\n",
		`c.toml:1:14: this is not a date; no parameter takes one`},
	{"a typographic minus", chainHead + "[electrons]\nhopping = −1\n",
		`c.toml:5:11: typographic quotes and signs are not TOML; write text in plain " and a minus as -`},
	{"a key twice in braces", "chain = { sites = 100, sites = 102 }\n",
		`c.toml:1:1: "sites" is given twice; keep one of them`},
	{"a key given twice", energyHead + "[chain]\nsites = 100\nsites = 102\n",
		`c.toml:4:1: "sites" is given twice; keep one of them`},
	{"a table begun twice", electronsHead + "[chain]\nspacing = 1.2\n",
		`c.toml:7:2: the table "chain" is begun twice; write its keys under one heading`},
	{"a value that is also a table", "energy = \"eV\"\nenergy.unit = \"eV\"\n",
		`c.toml:2:1: "energy" is used both for a value and for a table; keep one of them`},
	{"a misspelt key", energyHead + "[chain]\nsits = 100\n",
		`c.toml:3:1: there is no parameter "chain.sits"; the nearest is chain.sites`},
	{"a key in capitals", energyHead + "[chain]\nSites = 100\n",
		`c.toml:3:1: there is no parameter "chain.Sites"; the nearest is chain.sites`},
	{"a key outside its table", "energy = \"eV\"\nsites = 100\n",
		`c.toml:2:1: there is no parameter "sites"; the nearest is chain.sites`},
	{"a symbol for a key", electronsHead + "[bond_phonon]\nalpha = 4.1\n",
		`c.toml:8:1: there is no parameter "bond_phonon.alpha"; the nearest is bond_phonon.coupling`},
	{"a misspelt key in braces", "chain = { sites = 100, boundry = \"open\" }\n",
		`c.toml:1:24: there is no parameter "chain.boundry"; the nearest is chain.boundary`},
	{"a misspelt table", electronsHead + "[bond_phonons]\ncoupling = 4.1\nstiffness = 21\n",
		`c.toml:7:2: there is no table [bond_phonons]; the nearest is [bond_phonon]`},
	{"an empty unknown table", electronsHead + "[lattice]\n",
		`c.toml:7:2: there is no table [lattice]; the nearest is [chain]`},
	{"a table in capitals", "[Chain]\nsites = 100\n",
		`c.toml:2:1: there is no table [Chain]; the nearest is [chain]`},
	{"a table below a table", electronsHead + "[electrons.spin_states]\nup = 1\n",
		`c.toml:7:2: there is no table [electrons.spin_states]; the nearest is [electrons]`},
	{"a list below a table", electronsHead + "[[conditions.run]]\ntemperature = 1\n",
		`c.toml:7:3: there is no parameter "conditions.run"; the nearest is electrons.spin`},
	{"a number for a table", "chain = 100\n",
		`c.toml:1:9: chain must be a table, written [chain] on a line of its own with its keys below, not 100`},
	{"a text for a table", "energy = \"eV\"\nelectrons = \"half filled\"\n",
		`c.toml:2:13: electrons must be a table, written [electrons] on a line of its own with its keys below, not "half filled"`},
	{"a table for a text", energyHead + "[title]\nname = \"x\"\n",
		`c.toml:2:2: title must be text in UTF-8 of at most 4096 bytes, not a table`},
	{"a number for a text", energyHead + "title = 4\n",
		`c.toml:2:1: title must be text in UTF-8 of at most 4096 bytes, not 4`},
	{"a yes for a word", energyHead + "[chain]\nsites = 100\nboundary = true\n",
		`c.toml:4:1: chain.boundary must be "ring" or "open", not true`},
	{"an unknown energy unit", "energy = \"Ry\"\n",
		`c.toml:1:1: energy must be "t" or "eV", not "Ry"`},
	{"an energy unit in capitals", "energy = \"EV\"\n",
		`c.toml:1:1: energy must be "t" or "eV", not "EV"`},
	{"an unknown boundary", energyHead + "[chain]\nsites = 100\nboundary = \"periodic\"\n",
		`c.toml:4:1: chain.boundary must be "ring" or "open", not "periodic"`},
	{"a date for a number", chainHead + "[electrons]\nhopping = 1979-05-27\n",
		`c.toml:5:1: electrons.hopping must be 0 or a number from 1e-12 to 1e9 eV, not a date or time`},
	{"a list for a number", energyHead + "[chain]\nsites = [100, 200]\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not a list`},
	{"a table for a number", chainHead + "[electrons]\nhopping = { value = 1 }\n",
		`c.toml:5:1: electrons.hopping must be 0 or a number from 1e-12 to 1e9 eV, not a table`},
	{"a yes for a number", chainHead + "[electrons]\nhopping = true\n",
		`c.toml:5:1: electrons.hopping must be 0 or a number from 1e-12 to 1e9 eV, not true`},
	{"words for a number", chainHead + "[electrons]\nhopping = \"two\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "two": "two" is not a number`},
	{"no number before the unit", chainHead + "[electrons]\nhopping = \"\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "": there is no number`},
	{"part of a site", energyHead + "[chain]\nsites = 100.5\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not 100.5`},
	{"part of a site as text", energyHead + "[chain]\nsites = \"201/2\"\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not "201/2"`},
	{"no site", electronsHead + "[chain_2]\n",
		`c.toml:7:2: there is no table [chain_2]; the nearest is [chain]`},
	{"zero sites", energyHead + "[chain]\nsites = 0\n[electrons]\nhopping = 1\nfilling = 1\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not 0`},
	{"a negative number of sites", energyHead + "[chain]\nsites = -4\n[electrons]\nhopping = 1\nfilling = 1\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not -4`},
	{"too many sites", energyHead + "[chain]\nsites = 2097153\n[electrons]\nhopping = 1\nfilling = 1\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not 2097153`},
	{"an absurd number of sites", energyHead + "[chain]\nsites = 1e18\n[electrons]\nhopping = 1\nfilling = 1\n",
		`c.toml:3:1: chain.sites must be a whole number from 1 to 2097152, not 1e18`},
	{"three spin states", electronsHead + "spin = 3\n",
		`c.toml:7:1: electrons.spin must be 1 or 2, not 3`},
	{"more electrons than states", chainHead + "[electrons]\nhopping = 1\nfilling = 2.5\n",
		`c.toml:6:1: electrons.filling must be a number from 0 to 2, not 2.5`},
	{"more than one spinless electron per site", chainHead + "[electrons]\nhopping = 1\nspin = 1\nfilling = 1.5\n",
		`c.toml:7:1: electrons.filling must be a number from 0 to 1, not 1.5`},
	{"a negative filling", chainHead + "[electrons]\nhopping = 1\nfilling = -0.5\n",
		`c.toml:6:1: electrons.filling must be a number from 0 to 2, not -0.5`},
	{"a filling with a unit", chainHead + "[electrons]\nhopping = 1\nfilling = \"0.5 eV\"\n",
		`c.toml:6:1: electrons.filling must be a plain number, not "0.5 eV": this number has no unit`},
	{"too many electrons by number", chainHead + "[electrons]\nhopping = 1\nelectrons = 201\n",
		`c.toml:6:1: electrons.electrons must be a whole number from 0 to 200, not 201`},
	{"half an electron", chainHead + "[electrons]\nhopping = 1\nelectrons = 0.5\n",
		`c.toml:6:1: electrons.electrons must be a whole number from 0 to 200, not 0.5`},
	{"filling and electrons", electronsHead + "electrons = 50\n",
		`c.toml:7:1: electrons.filling and electrons.electrons exclude each other; give one of them`},
	{"neither filling nor electrons", chainHead + "[electrons]\nhopping = 1\n",
		`c.toml:4:2: the number of electrons is missing; give electrons.filling (electrons per site) or electrons.electrons (a whole number)`},
	{"no energy unit", "[chain]\nsites = 100\n[electrons]\nhopping = \"1 eV\"\nfilling = 1\n",
		`c.toml: energy is missing and must be "t" or "eV"`},
	{"no sites", energyHead + "[electrons]\nhopping = 1\nfilling = 1\n",
		`c.toml: chain.sites is missing and must be a whole number from 1 to 2097152`},
	{"no hopping", chainHead + "[electrons]\nfilling = 1\n",
		`c.toml:4:2: electrons.hopping is missing and must be 0 or a number from 1e-12 to 1e9 eV`},
	{"an empty phonon", electronsHead + "[bond_phonon]\n",
		`c.toml:7:2: bond_phonon.coupling is missing and must be 0 or a number from 1e-12 to 1e9 eV/Å: a phonon has a coupling and a stiffness, or no table`},
	{"a bond phonon without a spring", electronsHead + "[bond_phonon]\ncoupling = 4.1\n",
		`c.toml:7:2: bond_phonon.stiffness is missing and must be a number from 1e-12 to 1e9 eV/Å²: a phonon has a coupling and a stiffness, or no table`},
	{"a site phonon without a coupling", electronsHead + "[site_phonon]\nstiffness = 1\n",
		`c.toml:7:2: site_phonon.coupling is missing and must be 0 or a number from 1e-12 to 1e9 eV: a phonon has a coupling and a stiffness, or no table`},
	{"a negative hopping", chainHead + "[electrons]\nhopping = -1\nfilling = 1\n",
		`c.toml:5:1: electrons.hopping must be 0 or a number from 1e-12 to 1e9 eV, not -1 eV: its sign only shifts every wave vector by π`},
	{"a hopping that is not a number", chainHead + "[electrons]\nhopping = nan\nfilling = 1\n",
		`c.toml:5:1: electrons.hopping must be 0 or a number from 1e-12 to 1e9 eV, not NaN`},
	{"an infinite second hopping", electronsHead + "next_hopping = -inf\n",
		`c.toml:7:1: electrons.next_hopping must be 0 or a number of size 1e-12 to 1e9 eV with either sign, not -Inf`},
	{"infinity as text", chainHead + "[electrons]\nhopping = \"inf\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "inf": only finite numbers are accepted`},
	{"not a number as text", electronsHead + "[conditions]\ntemperature = \"NaN\"\n",
		`c.toml:8:1: conditions.temperature must be a number in eV, meV, t, K, THz or cm-1, not "NaN": only finite numbers are accepted`},
	{"a huge hopping", chainHead + "[electrons]\nhopping = 1e10\nfilling = 1\n",
		`c.toml:5:1: electrons.hopping must be 0 or a number from 1e-12 to 1e9 eV, not 1e10 eV`},
	{"a tiny second hopping", electronsHead + "next_hopping = -1e-13\n",
		`c.toml:7:1: electrons.next_hopping must be 0 or a number of size 1e-12 to 1e9 eV with either sign, not -1e-13 eV`},
	{"a text beyond the largest number", chainHead + "[electrons]\nhopping = \"1e999\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "1e999": the number is too large`},
	{"a text below the smallest number", chainHead + "[electrons]\nhopping = \"1e-999\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "1e-999": the number is too small to be told from zero`},
	{"a negative bond coupling", electronsHead + "[bond_phonon]\ncoupling = -4.1\nstiffness = 21\n",
		`c.toml:8:1: bond_phonon.coupling must be 0 or a number from 1e-12 to 1e9 eV/Å, not -4.1 eV/Å: its sign only decides what is called a positive displacement`},
	{"a soft spring", electronsHead + "[bond_phonon]\ncoupling = 4.1\nstiffness = 0\n",
		`c.toml:9:1: bond_phonon.stiffness must be a number from 1e-12 to 1e9 eV/Å², not 0 eV/Å²`},
	{"a negative spring", electronsHead + "[site_phonon]\ncoupling = 0.1\nstiffness = -1\n",
		`c.toml:9:1: site_phonon.stiffness must be a number from 1e-12 to 1e9 eV, not -1 eV: without a spring the lattice would collapse`},
	{"a negative frequency", electronsHead + "[site_phonon]\ncoupling = 0.1\nstiffness = 1\nfrequency = -0.01\n",
		`c.toml:10:1: site_phonon.frequency must be 0 or a number from 1e-12 to 1e9 eV, not -0.01 eV: an unstable bare lattice cannot be described`},
	{"a negative temperature", electronsHead + "[conditions]\ntemperature = \"-300 K\"\n",
		`c.toml:8:1: conditions.temperature must be 0 or a number from 1e-12 to 1e9 eV, not "-300 K": temperatures start at absolute zero`},
	{"a negative spacing", energyHead + "[chain]\nsites = 100\nspacing = \"−1.2 Å\"\n",
		`c.toml:4:1: chain.spacing must be 0 or a number from 1e-12 to 1e9 Å, not "−1.2 Å": a length has no sign`},
	{"an unknown unit", electronsHead + "[conditions]\ntemperature = \"300 F\"\n",
		`c.toml:8:1: conditions.temperature must be a number in eV, meV, t, K, THz or cm-1, not "300 F": the unit "F" is not one of these`},
	{"a unit in small letters", electronsHead + "[conditions]\ntemperature = \"25 mev\"\n",
		`c.toml:8:1: conditions.temperature must be a number in eV, meV, t, K, THz or cm-1, not "25 mev": small and capital letters differ, write meV`},
	{"a length for an energy", electronsHead + "next_hopping = \"0.1 Å\"\n",
		`c.toml:7:1: electrons.next_hopping must be a number in eV, meV, t, K, THz or cm-1, not "0.1 Å": the unit "Å" is not one of these`},
	{"an energy for a length", energyHead + "[chain]\nsites = 100\nspacing = \"1.2 eV\"\n",
		`c.toml:4:1: chain.spacing must be a number in Å, not "1.2 eV": the unit "eV" is not one of these`},
	{"an energy for a force", electronsHead + "[bond_phonon]\ncoupling = \"4.1 eV\"\n",
		`c.toml:8:1: bond_phonon.coupling must be a number in eV/Å, meV/Å or t/Å, not "4.1 eV": the unit "eV" is not one of these`},
	{"a force for a spring", electronsHead + "[bond_phonon]\nstiffness = \"21 eV/Å\"\n",
		`c.toml:8:1: bond_phonon.stiffness must be a number in eV/Å², meV/Å² or t/Å², not "21 eV/Å": the unit "eV/Å" is not one of these`},
	{"a temperature for a force", electronsHead + "[bond_phonon]\ncoupling = \"300 K\"\n",
		`c.toml:8:1: bond_phonon.coupling must be a number in eV/Å, meV/Å or t/Å, not "300 K": the unit "K" is not one of these`},
	{"t in terms of t", chainHead + "[electrons]\nhopping = \"0.3 t\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "0.3 t": t is this very number`},
	{"kelvin on a chain in units of t", "energy = \"t\"\n[chain]\nsites = 100\n[electrons]\nhopping = 1\nfilling = 1\n[conditions]\ntemperature = \"300 K\"\n",
		`c.toml:8:1: conditions.temperature must be a number in t, not "300 K": laboratory units need a chain in eV, and this one counts energies in t`},
	{"lengths on a chain in units of t", "energy = \"t\"\n[chain]\nsites = 100\n[electrons]\nhopping = 1\nfilling = 1\n[bond_phonon]\ncoupling = \"4.1 eV/Å\"\n",
		`c.toml:8:1: bond_phonon.coupling must be a number in t, not "4.1 eV/Å": laboratory units need a chain in eV, and this one counts energies in t`},
	{"a decimal comma in a text", chainHead + "[electrons]\nhopping = \"2,5 eV\"\n",
		`c.toml:5:1: electrons.hopping must be a number in eV, meV, K, THz or cm-1, not "2,5 eV": decimals are written with a point`},
	{"a division by zero", chainHead + "[electrons]\nhopping = 1\nfilling = \"1/0\"\n",
		`c.toml:6:1: electrons.filling must be a plain number, not "1/0": nothing can be divided by zero`},
	{"a product of numbers", chainHead + "[electrons]\nhopping = 1\nfilling = \"2*3\"\n",
		`c.toml:6:1: electrons.filling must be a plain number, not "2*3": only pi may follow a *`},
}

func TestBadFilesAreRefusedWithTheirMessage(t *testing.T) {
	for _, tt := range badFiles {
		t.Run(tt.mistake, func(t *testing.T) {
			c, err := Decode([]byte(tt.file), "c.toml")
			if err == nil {
				t.Fatalf("Decode accepted %q as %+v", tt.file, c)
			}
			if err.Error() != tt.want {
				t.Errorf("Decode(%q)\nsays  %v\nwant  %s", tt.file, err, tt.want)
			}
			if c != (Chain{}) {
				t.Errorf("Decode returned %+v with its error", c)
			}
			var file *FileError
			if !errors.As(err, &file) {
				t.Errorf("the error is a %T, want a *FileError", err)
			}
		})
	}
}

func TestEveryMistakeHasItsOwnMessage(t *testing.T) {
	place := regexp.MustCompile(`^c\.toml(:\d+:\d+)?: `)
	seen := map[string]string{}
	for _, tt := range badFiles {
		if !place.MatchString(tt.want) {
			t.Errorf("%s: %q does not begin with the file's name and place", tt.mistake, tt.want)
		}
		if strings.ContainsAny(tt.want, "\n\r") {
			t.Errorf("%s: the message has more than one line", tt.mistake)
		}
		if other, taken := seen[tt.want]; taken {
			t.Errorf("%s and %s have the same message", tt.mistake, other)
		}
		seen[tt.want] = tt.mistake
	}
}

func TestFilesWithoutContentAreRefused(t *testing.T) {
	for _, file := range []string{"", "\n\n", "# only a comment\n", "\ufeff", "\r\n"} {
		if _, err := Decode([]byte(file), "c.toml"); err == nil || !strings.HasPrefix(err.Error(), "c.toml: there is nothing in it;") {
			t.Errorf("Decode(%q) = %v", file, err)
		}
	}
}

func TestOverlongFilesAreRefused(t *testing.T) {
	long := electronsHead + "# " + strings.Repeat("x", MaxFile)
	const tooLong = "c.toml: this is longer than 65536 bytes, while a chain file takes about two thousand"
	if _, err := Read(strings.NewReader(long), "c.toml"); err == nil || err.Error() != tooLong {
		t.Errorf("Read of %d bytes: %v\nwant %s", len(long), err, tooLong)
	}
	var keys strings.Builder
	for i := range 150 {
		keys.WriteString(strings.Repeat("k", i+1) + " = 1\n")
	}
	const tooMany = "c.toml: this has 150 keys and list items, while a chain file has at most 22"
	if _, err := Decode([]byte(keys.String()), "c.toml"); err == nil || err.Error() != tooMany {
		t.Errorf("Decode of 150 keys: %v\nwant %s", err, tooMany)
	}
	const tables = "c.toml: this has 10001 keys and list items, while a chain file has at most 22"
	if _, err := Decode([]byte(strings.Repeat("[[a]]\n", 10000)), "c.toml"); err == nil || err.Error() != tables {
		t.Errorf("Decode of 10000 tables: %v\nwant %s", err, tables)
	}
	nested := "title = " + strings.Repeat("[", MaxFile/2)
	const tooDeep = "this is nested far deeper than any chain file"
	if _, err := Decode([]byte(nested), "c.toml"); err == nil || !strings.HasSuffix(err.Error(), tooDeep) {
		t.Errorf("Decode of deep nesting: %v\nwant … %s", err, tooDeep)
	}
}

func TestFileErrorsSayWhoIsToBlame(t *testing.T) {
	var param *ParamError
	_, err := Decode([]byte(chainHead+"[electrons]\nhopping = 1\nfilling = 3\n"), "c.toml")
	if !errors.As(err, &param) || param.Key != "electrons.filling" || param.Value != "3" || param.Want != "a number from 0 to 2" {
		t.Errorf("a filling of 3 gives %#v", param)
	}
	var key *KeyError
	_, err = Decode([]byte(energyHead+"[chain]\nsights = 100\n"), "c.toml")
	if !errors.As(err, &key) || key.Key != "chain.sights" || key.Nearest != "chain.sites" {
		t.Errorf("a misspelt key gives %#v", key)
	}
	var file *FileError
	if !errors.As(err, &file) || file.Line != 3 || file.Column != 1 {
		t.Errorf("a misspelt key is placed at %#v", file)
	}
}
