package study_test

import (
	"bytes"
	"context"
	"fmt"
	"math"
	"os"
	"reflect"
	"strconv"
	"testing"
	"time"

	"pgregory.net/rapid"

	"example.org/twokf/model"
	"example.org/twokf/model/report"
	"example.org/twokf/model/study"
)

func walk(path string, v reflect.Value, visit func(string, float64)) {
	switch v.Kind() {
	case reflect.Float64:
		visit(path, v.Float())
	case reflect.Pointer:
		if !v.IsNil() {
			walk(path, v.Elem(), visit)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if v.Type().Field(i).IsExported() {
				walk(path+"."+v.Type().Field(i).Name, v.Field(i), visit)
			}
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			walk(path+"[]", v.Index(i), visit)
		}
	}
}

func mag(t *rapid.T, name string) float64 {
	return rapid.OneOf(rapid.Float64Range(0.1, 10), rapid.Map(rapid.Float64Range(-12, 9), func(e float64) float64 {
		return min(max(math.Pow(10, e), model.MinMagnitude), model.MaxMagnitude)
	}), rapid.SampledFrom([]float64{model.MinMagnitude, model.MaxMagnitude, 1, 2.5, 21, 0.1})).Draw(t, name)
}
func mag0(t *rapid.T, name string) float64 {
	if rapid.IntRange(0, 3).Draw(t, name+"0") == 0 {
		return 0
	}
	return mag(t, name)
}
func ph(t *rapid.T, name string) model.Phonon {
	if !rapid.Bool().Draw(t, name) {
		return model.Phonon{}
	}
	return model.Phonon{Present: true, Coupling: mag0(t, name+"c"), Stiffness: mag(t, name+"k"), Frequency: mag0(t, name+"w")}
}

func TestScratchWild(t *testing.T) {
	seen := map[string]int{}
	slow := map[string]time.Duration{}
	stop := time.Now().Add(60 * time.Second)
	if s := os.Getenv("SECS"); s != "" {
		n, _ := strconv.Atoi(s)
		stop = time.Now().Add(time.Duration(n) * time.Second)
	}
	count := 0
	rapid.Check(t, func(t *rapid.T) {
		if time.Now().After(stop) {
			return
		}
		count++
		c := model.Chain{
			Sites:       rapid.IntRange(1, 12).Draw(t, "sites"),
			Boundary:    rapid.SampledFrom([]model.Boundary{model.Ring, model.Open}).Draw(t, "boundary"),
			Hopping:     mag0(t, "t"),
			NextHopping: mag0(t, "t2") * float64(rapid.SampledFrom([]int{1, -1}).Draw(t, "sign")),
			Spin:        rapid.IntRange(1, 2).Draw(t, "spin"),
			ByNumber:    true,
			Bond:        ph(t, "bond"),
			Site:        ph(t, "site"),
			Temperature: mag0(t, "T"),
		}
		c.NextHopping += 0
		c.Electrons = rapid.IntRange(0, c.Spin*c.Sites).Draw(t, "ne")
		if err := c.Validate(); err != nil {
			t.Fatal(err)
		}
		func() {
			defer func() {
				if r := recover(); r != nil {
					key := fmt.Sprint("PANIC ", r)
					if seen[key]++; seen[key] <= 3 {
						fmt.Printf("%s: %+v\n", key, c)
					}
				}
			}()
			start := time.Now()
			ctx, cancel := context.WithTimeout(context.Background(), 5*time.Second)
			defer cancel()
			p, err := study.Run(ctx, c, study.Settings{})
			d := time.Since(start)
			if d > 300*time.Millisecond {
				fmt.Printf("SLOW %v: %+v\n", d, c)
			}
			_ = slow
			if err != nil {
				fmt.Printf("ERR %v: %+v\n", err, c)
				return
			}
			for _, tr := range p.Troubles {
				key := "TROUBLE " + tr.Stage
				if seen[key]++; seen[key] <= 4 {
					fmt.Printf("%s %v: %+v\n", key, tr.Err, c)
				}
			}
			walk("", reflect.ValueOf(p), func(path string, v float64) {
				if math.IsNaN(v) || math.IsInf(v, 0) {
					key := fmt.Sprint(path, " ", v)
					if seen[key]++; seen[key] <= 3 {
						fmt.Printf("%s: %+v\n", key, c)
					}
				}
			})
			if p.Lattice != nil && !p.Lattice.Converged {
				key := "NOTCONV"
				if seen[key]++; seen[key] <= 10 {
					fmt.Printf("%s %g of %g it %d: %+v\n", key, p.Lattice.Residual, p.Lattice.Tolerance, p.Lattice.Iterations, c)
				}
			}
			if p.Lattice != nil && p.Lattice.Gap < 0 {
				key := "GAP<0"
				if seen[key]++; seen[key] <= 10 {
					fmt.Printf("%s %g: %+v\n", key, p.Lattice.Gap, c)
				}
			}
			var b bytes.Buffer
			if err := report.JSON(&b, p); err != nil {
				fmt.Println("JSON", err)
			}
		}()
	})
	fmt.Println(count)
	for k, v := range seen {
		fmt.Println(v, k)
	}
}
