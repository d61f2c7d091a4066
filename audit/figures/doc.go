// Package figures draws what an audit shows in pictures: the loss steps of
// circuits on one scale, plots over the duty cycle, and bars that compare
// before with after. It decides nothing: every number and sentence is given.
//
// Figures are drawn on a pen.Pen, so window and PDF show the same. They are laid
// out in figure units (a pixel at scale 1); text is 12.5, 11 and 14 units high.
// On paper the caller sets the scale around them:
//
//	p.Push(20, 40, 0.24) // mm; text of 12.5 units becomes 3 mm
//	regions := steps.Draw(p, 170/0.24, steps.Height(), figures.Light)
//	p.Pop()
//
// A figure fills the width it is given and never leaves its rectangle. If the
// height is less than it needs, all of it is drawn smaller. No label lies on
// another: what collides moves, what is too long ends in an ellipsis, and what
// finds no room at all is left out. Numbers that are NaN or infinite are drawn
// as missing. Nothing here panics.
//
// The efficiency of a pump or motor with the states of its duties, and what a fit leaves of its measured points:
//
//	m := solution.MachineMap(run, "P1") // nil where the block is no such machine
//	figures.MapOverSpeed(m, 1, units.Metric).Draw(p, 700, 500, figures.Light)
//	figures.MapOverSetting(m, 0, units.Metric).Draw(p, 700, 500, figures.Light)
//	figures.FitResiduals(m, units.Metric).Draw(p, 700, 400, figures.Light)
//
// A Sheet is a circuit drawn with its results. It is laid out in modules of the symbol
// grid, once for a drawing, and then drawn at any instant and scale:
//
//	sheet := figures.NewSheet(run.Circuit).Labelled(run.Duties...)
//	sheet.Draw(p, x, y, scale, figures.StateAt(run.Duties[0], t), figures.SheetOptions{
//		Palette: figures.Light, Scales: figures.ScalesOf(run.Duties...), Legend: true})
//
// Lines are as wide as the root of their flow and tinted by their pressure; chevrons
// point where it flows. A disc behind a block has the area of its heat. Pressures [Pa]
// and flows [m³/s] are those of the signals of a run, flow into a block positive.
//
// The places of what can be pointed at are returned, in the units of the caller; those of a
// sheet by Regions.
package figures
