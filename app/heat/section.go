package heat

import (
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// allCircuits is the choice of the values that hold for every circuit.
const allCircuits = "all circuits"

// section edits what the audit says of tank, cooler and air.
type section struct {
	ctx     station.Context
	scope   *widgets.Select
	group   *widgets.Select // which rows are seen: all at once would be a wall
	boxes   map[string]*fyne.Container
	rows    []*sectionRow
	content fyne.CanvasObject
	filling bool
}

// sectionRow is one key with its value, and where that comes from.
type sectionRow struct {
	s      *section
	key    *audit.HeatKey
	field  *widgets.Field
	choice *widgets.Select
	origin *widgets.Select
	note   *widgets.Text
}

func newSection(ctx station.Context) *section {
	s := &section{ctx: ctx}
	s.scope = widgets.Name(widgets.NewSelect([]string{allCircuits}, func(string) { s.show() }), "heat.scope")
	s.scope.Selected = allCircuits
	s.group = widgets.Name(widgets.NewSelect(nil, func(string) { s.see() }), "heat.group")
	s.boxes = map[string]*fyne.Container{}
	all := container.NewStack()
	for i := range audit.HeatKeys {
		k := &audit.HeatKeys[i]
		if s.boxes[k.Group] == nil {
			s.boxes[k.Group] = container.NewVBox()
			s.boxes[k.Group].Hide()
			s.group.Options = append(s.group.Options, k.Group)
			all.Add(s.boxes[k.Group])
		}
		r := s.row(k)
		s.rows = append(s.rows, r)
		s.boxes[k.Group].Add(r.object())
	}
	s.group.Selected = s.group.Options[0]
	s.boxes[s.group.Selected].Show()
	box := container.NewVBox(widgets.Row("Values of", s.scope, nil), widgets.Row("Show", s.group, nil), all)
	s.content = box
	return s
}

// see shows the rows of the group that is chosen.
func (s *section) see() {
	for name, box := range s.boxes {
		if name == s.group.Selected {
			box.Show()
		} else {
			box.Hide()
		}
	}
	s.content.Refresh()
}

func (s *section) row(k *audit.HeatKey) *sectionRow {
	r := &sectionRow{s: s, key: k, note: widgets.Wrapped("")}
	r.note.Importance = widget.LowImportance
	name := "heat.field." + k.Key
	if len(k.Choices) > 0 {
		r.choice = widgets.Name(widgets.NewSelect(k.Choices, r.choose), name)
		return r
	}
	r.field = widgets.Name(widgets.NewField("", r.take), name)
	r.field.Note = r.note
	if k.IsText {
		r.field.Scroll = fyne.ScrollHorizontalOnly
		return r
	}
	var words []string
	for _, o := range circuit.Origins {
		words = append(words, string(o))
	}
	r.origin = widgets.Name(widgets.NewSelect(words, r.setOrigin), name+".origin")
	r.origin.PlaceHolder = "origin?"
	return r
}

func (r *sectionRow) object() fyne.CanvasObject {
	switch {
	case r.choice != nil:
		return widgets.Row(r.key.Title, r.choice, r.note)
	case r.origin == nil:
		return widgets.Row(r.key.Title, r.field, r.note)
	}
	return widgets.Row(r.key.Title, container.NewGridWithColumns(2, r.field, r.origin), r.note)
}

// target names a key in the file, for the circuit at hand or for all.
func (r *sectionRow) target() string {
	if r.s.scope.Selected != allCircuits {
		return r.s.scope.Selected + "/heat." + r.key.Key
	}
	return "heat." + r.key.Key
}

// take reads what was typed; an empty field brings the default back.
func (r *sectionRow) take(text string) error {
	doc := r.s.ctx.Doc()
	own := r.s.own()
	_, given := own.Values[r.key.Key]
	if r.key.IsText {
		given = own.Words[r.key.Key] != ""
	}
	switch {
	case text == "" && !given:
		return nil
	case text == "":
		return doc.Drop(r.target())
	case r.key.IsText:
		return doc.Put(r.target(), text)
	}
	var keep units.Unit
	if v := own.Values[r.key.Key]; !math.IsNaN(v.Low) || !math.IsNaN(v.High) {
		keep = v.Unit
	}
	quantity, err := station.Typed(text, r.key.Dim, r.unit(own.Values[r.key.Key]), keep)
	if err != nil {
		return err
	}
	return doc.Put(r.target(), quantity)
}

func (r *sectionRow) unit(v circuit.Value) units.Unit {
	if v.Unit.Factor != 0 {
		return v.Unit
	}
	if r.key.Default != "" {
		if _, u, err := units.Parse(r.key.Default, r.key.Dim); err == nil && r.s.ctx.System() == units.Metric {
			return u
		}
	}
	if r.key.Key == "tank_area" || r.key.Key == "steel_area" || r.key.Dim == units.Area {
		if u, err := units.ParseUnit("m2", units.Area); err == nil {
			return u
		}
	}
	return units.Preferred(r.key.Dim, r.s.ctx.System())
}

func (r *sectionRow) choose(word string) {
	if r.s.filling || word == "" {
		return
	}
	if err := r.s.ctx.Doc().Put(r.target(), word); err != nil {
		r.fail(err)
	}
}

func (r *sectionRow) setOrigin(word string) {
	if r.s.filling || word == "" {
		return
	}
	if err := r.s.ctx.Doc().Set(r.target()+".origin", word); err != nil {
		r.fail(err)
	}
}

// fail says under the row why it was refused, and shows what holds again.
func (r *sectionRow) fail(err error) {
	r.s.show()
	r.note.SetText("⚠ " + err.Error())
	r.note.Importance = widget.DangerImportance
	r.note.Refresh()
}

// own is what the file says in the scope at hand.
func (s *section) own() audit.HeatSection {
	f := s.ctx.Doc().File()
	if c := f.Circuit(s.scope.Selected); c != nil {
		return c.Heat
	}
	return f.Heat
}

// show fills all rows.
func (s *section) show() {
	s.filling = true
	defer func() { s.filling = false }()
	f := s.ctx.Doc().File()
	options := []string{allCircuits}
	for _, c := range f.Circuits {
		options = append(options, c.Name)
	}
	if strings.Join(options, "\n") != strings.Join(s.scope.Options, "\n") {
		s.scope.Options = options
		if f.Circuit(s.scope.Selected) == nil {
			s.scope.Selected = allCircuits
		}
		s.scope.Refresh()
	}
	holds := f.Heat
	if c := f.Circuit(s.scope.Selected); c != nil {
		holds = f.HeatOf(c)
	}
	var oil *circuit.Conditions
	if o, err := f.Conditions(); err == nil {
		oil = &o
	}
	own := s.own()
	for _, r := range s.rows {
		r.fill(own, holds, oil)
	}
}

func (r *sectionRow) fill(own, holds audit.HeatSection, oil *circuit.Conditions) {
	switch {
	case r.choice != nil:
		if word := holds.Word(r.key.Key); r.choice.Selected != word {
			r.choice.Selected = word
			r.choice.Refresh()
		}
		source := r.key.Source
		if b := holds.Drawn.Block; b != "" && r.key.Key == "cooler_place" {
			source = "as " + b + " is drawn"
		}
		r.say(r.key.Text, own.Words[r.key.Key] != "", holds.Words[r.key.Key] != "", source)
	case r.key.IsText:
		r.field.SetValue(own.Words[r.key.Key], r.key.Text)
	default:
		r.fillNumber(own, holds, oil)
	}
	if f := r.s.ctx.Doc().File(); f != nil && f.Calendar != nil && audit.HeatShiftKey(r.key.Key) {
		r.note.SetText("not used: the shifts of the calendar hold, see Duty, Year")
	}
}

// say writes the note of a row that has no field.
func (r *sectionRow) say(text string, own, given bool, source string) {
	r.note.Importance = widget.LowImportance
	switch {
	case own:
	case given:
		text = "as for all circuits · " + text
	case source != "":
		text = "default: " + source + " · " + text
	}
	r.note.SetText(text)
}

func (r *sectionRow) fillNumber(own, holds audit.HeatSection, oil *circuit.Conditions) {
	v, isOwn := own.Values[r.key.Key]
	r.origin.Selected = string(v.Origin)
	if isOwn {
		r.origin.Enable()
	} else {
		r.origin.Disable()
	}
	r.origin.Refresh()
	if isOwn {
		var parts []string
		for _, end := range []struct {
			name string
			x    float64
		}{{"low", v.Low}, {"high", v.High}} {
			if !math.IsNaN(end.x) {
				parts = append(parts, end.name+" "+station.Shown(r.s.ctx, end.x, v.Unit, r.key.Dim))
			}
		}
		parts = append(parts, r.key.Text)
		if v.Note != "" {
			parts = append(parts, v.Note)
		}
		r.field.SetPlaceHolder("")
		r.field.SetValue(station.Shown(r.s.ctx, v.SI, v.Unit, r.key.Dim), strings.Join(parts, " · "))
		return
	}
	there, given, ok := holds.Value(r.key.Key, oil)
	hint := r.key.Text
	placeholder := ""
	switch {
	case given:
		hint = "as for all circuits · " + hint
	case r.key.Source != "":
		hint = "default: " + r.key.Source + " · " + hint
	}
	if ok {
		u := there.Unit
		if u.Factor == 0 {
			u = r.unit(circuit.Value{})
		}
		placeholder = r.s.ctx.Local(units.Format(there.SI, u, 3))
	}
	if r.field.PlaceHolder != placeholder {
		r.field.SetPlaceHolder(placeholder)
	}
	r.field.SetValue("", hint)
}
