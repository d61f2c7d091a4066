package pdf

import (
	"fmt"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// mapsAbreast is how many pictures of machines a circuit has at most: two maps, or a map and what its fit leaves.
const mapsAbreast = 2

const mapGap = 16.0 // between two pictures, figure units

// machines prints, for each circuit, its machines and drives, and maps of those with most loss.
func (l *layout) machines() {
	any := false
	for i := range l.r.Circuits {
		page := &l.r.Circuits[i]
		if len(page.Machines) == 0 {
			continue
		}
		any = true
		maps := l.maps(i)
		l.heading(2, page.Name, l.mapsHeight(maps)+20)
		l.abreast(maps)
		l.table(machineTable(page.Machines))
		l.fits(page.Machines)
	}
	if !any {
		l.para("No machine or drive ran.", l.body())
	}
}

// maps are the pictures of the machines of a circuit with most loss.
func (l *layout) maps(i int) []figures.Picture {
	if known, ok := l.pictures[i]; ok { // for all trials of the report
		return known
	}
	var first [][]figures.Picture
	for _, m := range l.r.Circuits[i].Machines {
		if p := figures.PicturesOf(l.s, l.s.Circuits[i], m.Block, l.r.System); len(p) > 0 && len(first) < mapsAbreast {
			first = append(first, p)
		}
	}
	var out []figures.Picture
	for _, p := range first {
		out = append(out, p[0])
	}
	if len(first) == 1 && len(first[0]) > 1 { // a second view of the only one
		out = append(out, first[0][len(first[0])-1])
	}
	l.pictures[i] = out
	return out
}

// half is the width of one of two pictures side by side.
func half(w float64) float64 { return (w - mapGap) / mapsAbreast }

func (l *layout) mapsHeight(maps []figures.Picture) float64 {
	if len(maps) == 0 {
		return 0
	}
	return figureLeast * maps[0].Height(half(fullW/figureLeast))
}

// firstMaps is the height of what stays with the heading of the section.
func (l *layout) firstMaps() float64 {
	for i := range l.r.Circuits {
		if len(l.r.Circuits[i].Machines) > 0 {
			return l.mapsHeight(l.maps(i)) + 30
		}
	}
	return 0
}

// abreast draws pictures side by side, each in half the width.
func (l *layout) abreast(maps []figures.Picture) {
	if len(maps) == 0 {
		return
	}
	l.figure(func(w float64) float64 { return maps[0].Height(half(w)) }, func(p pen.Pen, w, h float64) {
		for i, m := range maps {
			p.Push(float64(i)*(half(w)+mapGap), 0, 1)
			m.Draw(p, half(w), h, l.pal)
			p.Pop()
		}
	})
	l.y += 2 * l.sheet.room
}

// machineTable has a row a machine and a column a figure.
func machineTable(pages []audit.MachinePage) table {
	t := table{title: "What passes machines and drives, most loss first", cols: []column{{"", false}},
		note: "Efficiency: what leaves over what enters, in four quadrants, starts left out. Part load is counted over the rated power, of pumps and hydraulic motors over the highest shaft power they have in the duties."}
	for _, f := range pages[0].Figures {
		t.cols = append(t.cols, column{f.Name, true})
	}
	for _, m := range pages {
		t.rows = append(t.rows, row{cells: append([]string{m.Block + ", " + strings.ToLower(m.Kind[:1]) + m.Kind[1:]}, cellsOf(m.Figures)...)})
	}
	return t
}

func cellsOf(list []audit.Figure) []string {
	var out []string
	for _, f := range list {
		out = append(out, f.Text)
	}
	return out
}

// fits says how well fitted laws meet their points, and what was extrapolated.
func (l *layout) fits(pages []audit.MachinePage) {
	t := table{title: "How well fitted laws meet their measured points", cols: []column{{"", false}},
		note: "Points of overall efficiency. Held out: each speed in turn left out of the fit. Outside the points, pale in the maps, the law is extrapolated."}
	for _, m := range pages {
		if len(m.Fit) == 0 {
			continue
		}
		if len(t.rows) == 0 {
			for _, f := range m.Fit {
				t.cols = append(t.cols, column{f.Name, true})
			}
		}
		t.rows = append(t.rows, row{cells: append([]string{m.Block}, cellsOf(m.Fit)...)})
	}
	if len(t.rows) == 0 {
		return
	}
	l.table(t)
	for _, m := range pages {
		for _, w := range m.Warnings {
			l.para(fmt.Sprintf("%s: %s.", m.Block, strings.TrimSuffix(w, ".")), l.small())
		}
	}
}
