package plot_test

import (
	"fmt"
	"math"

	"example.org/twokf/tui/plot"
)

// A cosine band, filled up to kF = 3π/8.
func Example() {
	const kF = 3 * math.Pi / 8
	var k, energy []float64
	for i := range 129 {
		q := math.Pi * float64(i) / 128
		k, energy = append(k, q), append(energy, -2*math.Cos(q))
	}
	const ( // roles; the caller maps them to styles
		text plot.Ink = iota + 1
		axis
		band
		mark
	)
	c := plot.New(46, 11, plot.ASCII)
	c.Trim = true
	c.Heading("energy (t)", text)
	c.Frame(plot.Axis{Min: 0, Max: math.Pi, Pi: true, Name: "k"}, plot.Axis{Min: -2, Max: 2}, axis)
	c.Line(k, energy, band, plot.Solid)
	c.HMark(-2*math.Cos(kF), "EF", mark)
	c.VMark(kF, "kF", mark)
	fmt.Print(c)

	col, row, _ := c.Cell(kF, -2*math.Cos(kF))
	q, e, _ := c.At(col, row)
	fmt.Printf("pointing at k = %.1f, E = %.1f\n", q, e)
	// Output:
	// energy (t)
	//  2 +               :kF               ..---''''
	//    |               :            ..-''
	//    |               :        ..-'
	//    |               :     .-'
	//  0 +               :  .-'
	//    |- - - - - - - .-''- - - - - - - - - - - EF
	//    |         ..-'' :
	// -2 +....---''      :
	//     +--------------------+-------------------+
	//     0                  pi/2        k        pi
	// pointing at k = 1.1, E = -0.8
}
