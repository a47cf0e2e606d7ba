package model_test

import (
	"fmt"

	"example.org/twokf/model"
)

func ExampleSet() {
	c := model.Chain{Energy: model.UnitEV, Sites: 164, Hopping: 0.4, Spin: 2, Filling: 0.5}
	c, err := model.Set(c, "temperature=300 K")
	fmt.Printf("%.5f eV, %v\n", c.Temperature, err)
	_, err = model.Set(c, "temprature=300 K")
	fmt.Println(err)
	// Output:
	// 0.02585 eV, <nil>
	// there is no parameter "temprature"; the nearest is conditions.temperature
}

func ExampleDecode() {
	const file = `
energy = "eV"
[chain]
sites = 202
[electrons]
hopping = 2.5
filling = 1
[bond_phonon]
coupling = 4.1
stiffness = "21 eV/A"
`
	_, err := model.Decode([]byte(file), "polyene.toml")
	fmt.Println(err)
	// Output:
	// polyene.toml:10:1: bond_phonon.stiffness must be a number in eV/Å², meV/Å² or t/Å², not "21 eV/A": the unit "eV/A" is not one of these
}

func ExampleParam_Step() {
	c := model.Chain{Sites: 202, Hopping: 1, Spin: 2, Filling: 1}
	for _, key := range []string{"hopping", "temperature", "sites", "filling"} {
		p, err := model.FindParam(key)
		if err != nil {
			fmt.Println(err)
			continue
		}
		fmt.Println(p.Symbol, p.Format(c), "→", p.Format(p.Step(c, 1, false)))
	}
	// Output:
	// t 1 → 1.1
	// T 0 → 0.001
	// N 202 → 206
	// ν 1 → 1.0198019801980198
}
