// Package pen is the one small drawing interface of the program. Circuit sheet,
// plots, loss steps and the icons of blocks are drawn on a Pen; its back ends
// put them on the screen (Raster), on a PDF page (PDF) or into a list for tests
// (Recorder). What is printed is therefore what was seen.
//
// # Units and directions
//
// Coordinates, line widths and text sizes share one user unit: the pixel of a
// Raster, the document unit of a PDF page (mm with NewPDF). x runs right, y
// runs down, angles are degrees clockwise from +x as seen on the page. Push
// moves and scales what follows, so that a figure designed in pixels can be put
// on paper:
//
//	p.Push(20, 40, 0.25) // origin at 20 mm, 40 mm; 4 figure units a mm
//	figure(p)
//	p.Pop()
//
// # What a pen refuses
//
// No input makes a pen panic. A call with a coordinate, size or width that is
// NaN, infinite or beyond ±1e7 after scaling draws nothing and is counted in
// Skipped, as is a Pop or Unclip without its partner. Text is cleaned first, see Clean.
//
// Pens are not safe for concurrent use; different pens are.
package pen
