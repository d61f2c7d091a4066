package pen

import "image/color"

// Worded is a pen that changes every text before it is written, such as its decimal sign;
// nil changes none.
func Worded(p Pen, change func(string) string) Pen {
	if change == nil {
		return p
	}
	return worded{p, change}
}

type worded struct {
	Pen
	change func(string) string
}

func (w worded) Text(p Pt, s string, size float64, c color.NRGBA, al Align, bold bool) {
	w.Pen.Text(p, w.change(s), size, c, al, bold)
}

func (w worded) RotatedText(p Pt, s string, size, deg float64, c color.NRGBA, al Align, bold bool) {
	w.Pen.RotatedText(p, w.change(s), size, deg, c, al, bold)
}

func (w worded) TextWidth(s string, size float64, bold bool) float64 {
	return w.Pen.TextWidth(w.change(s), size, bold)
}
