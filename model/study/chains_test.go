package study_test

import (
	"context"
	"fmt"
	"math"
	"reflect"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/study"
)

// portraitOf studies a chain from nothing.
func portraitOf(t rapid.TB, c model.Chain) *study.Portrait {
	t.Helper()
	p, err := study.Run(context.Background(), c, study.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	for _, trouble := range p.Troubles {
		t.Errorf("%s: %v", trouble.Stage, trouble.Err)
	}
	if !p.Complete {
		t.Error("the portrait is not complete")
	}
	return p
}

// ring returns a ring in units of t with so many electrons and no phonon.
func ring(sites, electrons, spin int) model.Chain {
	return model.Chain{Sites: sites, Hopping: 1, Spin: spin, ByNumber: true, Electrons: electrons}
}

// halfFilledRing has one branch of coupling λ: λ = g_s g²/(2π t K_s) of the site
// phonon, 2 g_s α²/(π t K) of the bond phonon, coupling 1.
func halfFilledRing(site bool, sites int, lambda float64) model.Chain {
	c := ring(sites, sites, 2)
	if site {
		c.Site = model.Phonon{Present: true, Coupling: 1, Stiffness: 1 / (math.Pi * lambda)}
	} else {
		c.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 4 / (math.Pi * lambda)}
	}
	return c
}

// genericRing has both branches, of couplings λ_bond = 4 g_s α²/(2π v_F K) and
// λ_site = g_s g²/(2π v_F K_s), v_F = 2 sin k_F, at a filling other than one half;
// a coupling of 0 leaves the branch out.
func genericRing(sites, electrons int, bond, site float64) model.Chain {
	c := ring(sites, electrons, 2)
	velocity := 2 * math.Sin(math.Pi*c.BandFilling())
	if bond > 0 {
		c.Bond = model.Phonon{Present: true, Coupling: 1, Stiffness: 4 / (math.Pi * velocity * bond)}
	}
	if site > 0 {
		c.Site = model.Phonon{Present: true, Coupling: 1, Stiffness: 1 / (math.Pi * velocity * site)}
	}
	return c
}

// anyChain draws a chain of at most so many sites with numbers of common size.
func anyChain(most int) *rapid.Generator[model.Chain] {
	return rapid.Custom(func(t *rapid.T) model.Chain {
		return drawChain(t, most, rapid.Map(rapid.IntRange(1, 40), func(i int) float64 { return float64(i) / 10 }))
	})
}

// wildChain draws a valid chain of at most so many sites whose numbers may be as
// small or as large as the model allows, and zero where it allows that.
func wildChain(most int) *rapid.Generator[model.Chain] {
	return rapid.Custom(func(t *rapid.T) model.Chain {
		return drawChain(t, most, rapid.OneOf(
			rapid.Float64Range(0.1, 10),
			rapid.Map(rapid.Float64Range(-12, 9), func(e float64) float64 {
				return min(max(math.Pow(10, e), model.MinMagnitude), model.MaxMagnitude)
			}),
			rapid.SampledFrom([]float64{model.MinMagnitude, 0.1, 1, 2.5, 21, model.MaxMagnitude}),
		))
	})
}

func drawChain(t *rapid.T, most int, positive *rapid.Generator[float64]) model.Chain {
	orZero := rapid.OneOf(positive, positive, positive, rapid.Just(0.0))
	phonon := func(name string) model.Phonon {
		if !rapid.Bool().Draw(t, name) {
			return model.Phonon{}
		}
		return model.Phonon{
			Present:   true,
			Coupling:  orZero.Draw(t, name+" coupling"),
			Stiffness: positive.Draw(t, name+" stiffness"),
			Frequency: orZero.Draw(t, name+" frequency"),
		}
	}
	c := model.Chain{
		Energy:      rapid.SampledFrom([]model.EnergyUnit{model.UnitHopping, model.UnitEV}).Draw(t, "energy"),
		Sites:       rapid.IntRange(1, most).Draw(t, "sites"),
		Boundary:    rapid.SampledFrom([]model.Boundary{model.Ring, model.Open}).Draw(t, "boundary"),
		Hopping:     orZero.Draw(t, "hopping"),
		Spin:        rapid.IntRange(1, 2).Draw(t, "spin"),
		Bond:        phonon("bond"),
		Site:        phonon("site"),
		Temperature: orZero.Draw(t, "temperature"),
	}
	if rapid.Bool().Draw(t, "next neighbours") {
		size := positive.Draw(t, "next hopping")
		if c.Hopping > 0 { // of two hoppings that differ by more than rounding the smaller one is lost
			size = min(max(size, 1e-12*c.Hopping, model.MinMagnitude), 1e12*c.Hopping)
		}
		c.NextHopping = size * rapid.SampledFrom([]float64{1, -1}).Draw(t, "its sign")
	}
	n := rapid.IntRange(0, c.Spin*c.Sites).Draw(t, "electrons")
	switch {
	case rapid.Bool().Draw(t, "by number"):
		c.ByNumber, c.Electrons = true, n
	case rapid.Bool().Draw(t, "whole"):
		c.Filling = float64(n) / float64(c.Sites)
	default:
		c.Filling = float64(rapid.IntRange(0, 1000*c.Spin).Draw(t, "filling in thousandths")) / 1000
	}
	if err := c.Validate(); err != nil {
		t.Fatalf("drew an invalid chain: %v", err)
	}
	return c
}

// changed draws a change of one parameter of c; where the change is not possible
// it returns c.
func changed(t *rapid.T, c model.Chain) model.Chain {
	count, _ := c.Count()
	switch rapid.IntRange(0, 9).Draw(t, "kind of change") {
	case 0:
		branch := rapid.SampledFrom([]string{"bond_phonon", "site_phonon"}).Draw(t, "branch")
		next, err := model.Set(c, branch+"="+rapid.SampledFrom([]string{"on", "off"}).Draw(t, "switch"))
		if err != nil {
			t.Fatal(err)
		}
		return next
	case 1: // the same electrons, said in the other way
		p, value := param(t, "electrons"), float64(count)
		if c.ByNumber {
			p, value = param(t, "filling"), float64(count)/float64(c.Sites)
		}
		next, err := p.With(c, value)
		if err != nil {
			t.Fatal(err)
		}
		return next
	}
	p := rapid.SampledFrom(model.Params()).Draw(t, "parameter")
	if rapid.IntRange(0, 3).Draw(t, "size") == 0 { // most that may be overlooked hangs on it
		p = param(t, "sites")
	}
	switch {
	case p.Kind == model.Text:
		next, err := p.Parse(c, rapid.StringMatching(`[a-z]{1,4}`).Draw(t, "text"))
		if err != nil {
			t.Fatal(err)
		}
		return next
	case p.Turns() && rapid.Bool().Draw(t, "turn"):
		return p.Step(c, rapid.SampledFrom([]int{-2, -1, 1, 2}).Draw(t, "turns"), rapid.Bool().Draw(t, "fine"))
	}
	value := float64(rapid.IntRange(0, 3).Draw(t, "value"))
	if p.Kind == model.Number {
		value = p.Get(c) * rapid.SampledFrom([]float64{0, 0.5, 1.1, 2}).Draw(t, "factor")
	}
	next, _ := p.With(c, value) // c itself where the value is refused
	return next
}

func param(t rapid.TB, key string) model.Param {
	p, err := model.FindParam(key)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// difference returns where two values differ, "" if they are the same to the
// last bit; NaN equals NaN.
func difference(a, b any) string { return differ("", reflect.ValueOf(a), reflect.ValueOf(b)) }

func differ(path string, a, b reflect.Value) string {
	switch a.Kind() {
	case reflect.Float64:
		if x, y := a.Float(), b.Float(); x != y && !(math.IsNaN(x) && math.IsNaN(y)) {
			return fmt.Sprintf("%s: %v and %v", path, x, y)
		}
	case reflect.Pointer:
		if a.IsNil() || b.IsNil() {
			if a.IsNil() != b.IsNil() {
				return path + ": just one is there"
			}
			return ""
		}
		return differ(path, a.Elem(), b.Elem())
	case reflect.Struct:
		for i := range a.NumField() {
			if f := a.Type().Field(i); f.IsExported() {
				if d := differ(path+"."+f.Name, a.Field(i), b.Field(i)); d != "" {
					return d
				}
			}
		}
	case reflect.Slice, reflect.Array:
		if a.Len() != b.Len() {
			return fmt.Sprintf("%s: %d and %d elements", path, a.Len(), b.Len())
		}
		for i := range a.Len() {
			if d := differ(fmt.Sprintf("%s[%d]", path, i), a.Index(i), b.Index(i)); d != "" {
				return d
			}
		}
	default:
		if !reflect.DeepEqual(a.Interface(), b.Interface()) {
			return fmt.Sprintf("%s: %v and %v", path, a, b)
		}
	}
	return ""
}
