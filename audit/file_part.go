package audit

import (
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/machines/units"
)

// part keeps the stretch of an imported recording that makes the duty, such as its typical
// cycle: part: {from: 12.4 s, to: 31.9 s, is: typical cycle}.
func (r *reader) part(s scope, d *duty.Duty, f map[string]entry) {
	e, ok := f["part"]
	i := len(r.file.Imports) - 1
	if !ok || r.file.Imports[i] == nil {
		return
	}
	in := s.in("part")
	fields := r.fields(in, e.value, "", "from", "to", "is")
	from, begins := r.optional(in, fields, "from", units.Time)
	to, ends := r.optional(in, fields, "to", units.Time)
	p := logged.Part{From: from.SI, To: to.SI, Is: r.text(in, fields, "is")}
	switch {
	case !begins || !ends:
		r.bad(s, e.value, "part", "needs from and to, as in {from: 12.4 s, to: 31.9 s}")
	case p.Whole():
		r.bad(s, e.value, "part", "ends at %s, which is not after its start at %s", to.Text, from.Text)
	default:
		if err := p.Cut(d); err != nil {
			r.bad(s, e.value, "part", "%v", err)
			return
		}
		r.file.Imports[i].Part = p
	}
}
