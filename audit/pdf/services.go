package pdf

import (
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// services prints the services of a cylinder-switched machine beside another machine.
func (l *layout) services(circuit int) {
	t := l.r.Circuits[circuit].Services
	if len(t.Rows) == 0 {
		return
	}
	l.table(fromReport(t))
	for _, s := range l.s.Circuits[circuit].Services {
		f, ok := figures.ServiceOf(s, l.r.System)
		if !ok {
			continue
		}
		l.figure(f.Height, func(p pen.Pen, w, h float64) { f.Draw(p, w, h, l.pal) })
		l.para(f.Verdict, l.body())
	}
}
