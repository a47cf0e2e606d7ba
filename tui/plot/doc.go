// Package plot is a raster of character cells for plots in a terminal: axes,
// series and marks made of fine braille dots (2×4 in a cell) or of plain ASCII
// (three heights in a cell).
//
// A plot stands on white space. Its axes are rulers beside the data, as long
// as the data reach, with their ticks turned inside; marks are thin dotted
// lines with a short label; one heading line says what is shown.
//
// # Order of work
//
//	c.Reset(w, h, plot.Braille)    // an empty picture, memory reused
//	c.Heading("energy (eV)", bold) // optional, takes the first row
//	c.Frame(x, y, faint)           // axes; says where the data go
//	c.Line(k, energy, blue, plot.Solid)
//	c.Name("band")                 // legend entry of the series drawn last
//	c.VMark(kF, "kF", green)
//	buf = c.AppendRow(buf[:0], row, style)
//
// Nothing is drawn outside the frame, and nothing at all before Frame. Labels
// of marks and the legend are placed when the first row is asked for, because
// only then is it known where the curves leave room.
//
// # Conventions
//
// Cells are counted from the top left, columns to the right and rows down.
// Every glyph is one cell wide. A cell has one [Ink], a role that the caller
// turns into a style; series stand over axes and marks, the series drawn last
// over earlier ones, text over everything. Colour is never needed: each
// [Pattern] has its own dots in braille and its own characters in ASCII.
//
// NaN and ±Inf break a curve. Every routine returns for every float64, and
// none allocates once the Canvas has seen a picture of that size.
// A Canvas serves one goroutine.
package plot
