package intake

import (
	"slices"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/machines/units"
)

// options are the tracks that may be added.
func (t *tracks) options() (out []string) {
	p := t.p
	add := func(name string) {
		if !slices.Contains(out, name) && p.track(name) < 0 {
			out = append(out, name)
		}
	}
	for _, a := range p.allAxes() {
		for _, w := range []duty.What{duty.Speed, duty.Load, duty.Position, duty.Command} {
			add(a.Name + "." + w.String())
		}
	}
	for _, c := range p.ctx.Doc().File().Circuits {
		for i := range c.Blocks {
			for _, w := range circuit.TracksOf(&c.Blocks[i]) {
				add(c.Blocks[i].ID + "." + w.String())
			}
		}
	}
	return out
}

func (p *Page) track(name string) int {
	return slices.IndexFunc(p.tracks, func(t logged.Track) bool { return t.Name == name })
}

// addTrack begins a track with the likely channel, if there is one that nothing has yet.
func (t *tracks) addTrack(name string) {
	p := t.p
	x := logged.Track{Name: name, Law: logged.AsMeasured, Says: map[string]string{}}
	of, what, err := x.Split()
	if err != nil {
		return
	}
	kind, _ := p.kind(of)
	used := map[string]bool{}
	for _, o := range p.tracks {
		for _, c := range o.Says {
			used[c] = true
		}
	}
	fits := p.channelsOf(what.Dim(kind))
	if i := slices.IndexFunc(fits, func(c string) bool { return !used[c] }); i >= 0 {
		x.Says["column"] = fits[i]
	} else if len(fits) == 0 { // another law can be met, perhaps
		for _, l := range logged.Laws(what, kind) {
			if p.meets(l) && l.Word != logged.Constant {
				x.Law = l.Word
				break
			}
		}
	}
	p.known[name] = true
	p.tracks = append(p.tracks, x)
	p.derive()
}

// meets reports whether there is a channel for each that a law must have.
func (p *Page) meets(l logged.Law) bool {
	for _, c := range l.Channels {
		if !c.Optional && len(p.channelsOf(c.Dim)) == 0 {
			return false
		}
	}
	return true
}

// channelsOf are the columns that hold a quantity.
func (p *Page) channelsOf(d units.Dim) (out []string) {
	if p.rec == nil {
		return nil
	}
	for _, s := range p.rec.Series {
		if s.Dim == d && s.Quantity != "" || d == units.Ratio && s.Quantity == "" {
			out = append(out, s.Column)
		}
	}
	return out
}
