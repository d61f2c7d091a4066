package payback

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/machines/units"
)

// costFields are the cost of one proposal.
type costFields struct {
	circuit                 string
	content                 fyne.CanvasObject
	low, likely, high, note *widgets.Field
	rest                    []fyne.CanvasObject // all but the likely cost, which comes first
}

// showCosts shows the fields of every proposal.
func (in *inputs) showCosts(f *audit.File) {
	var proposals []audit.CircuitEntry
	for _, c := range f.Circuits {
		if c.Role == audit.Proposal {
			proposals = append(proposals, c)
		}
	}
	same := len(in.cost) == len(proposals) && len(in.costs.Objects) > 0
	for i := range in.cost {
		same = same && in.cost[i].circuit == proposals[i].Name
	}
	if !same {
		in.cost, in.costs.Objects = nil, nil
		for i, c := range proposals {
			in.cost = append(in.cost, in.newCost(i, c.Name))
			in.costs.Add(in.cost[i].content)
		}
		if len(proposals) == 0 {
			none := widgets.Wrapped("")
			none.SetText("The cost of each proposal stands here once there is one; add it under Circuit.")
			in.costs.Add(none)
		}
	}
	for i, c := range proposals {
		in.cost[i].show(in.ctx, c.Cost)
	}
}

func (in *inputs) newCost(i int, name string) *costFields {
	c := &costFields{circuit: name}
	field := func(key, edit string) *widgets.Field {
		return in.field(numbered("payback.cost."+key, i), func(text string) error {
			quantity := text
			if key != "note" {
				var err error
				if quantity, err = station.Typed(text, units.Money, currency(in.ctx), units.Unit{}); err != nil {
					return err
				}
			}
			return in.edit(edit+" of "+name, name+"/retrofit_cost."+key, quantity)
		})
	}
	c.low, c.likely, c.high = field("low", "Change the low cost"), field("likely", "Change the likely cost"), field("high", "Change the high cost")
	c.note = field("note", "Change the note on the cost")
	c.note.Scroll = fyne.ScrollHorizontalOnly
	title := widget.NewLabel(name)
	title.Truncation = fyne.TextTruncateEllipsis
	c.rest = []fyne.CanvasObject{widgets.FieldRow("  low", c.low), widgets.FieldRow("  high", c.high), widgets.FieldRow("  note", c.note)}
	c.content = container.NewVBox(title, c.rest[0], widgets.FieldRow("  likely", c.likely), c.rest[1], c.rest[2])
	return c
}

func (c *costFields) show(ctx station.Context, cost audit.Cost) {
	fields := map[*widgets.Field]float64{c.low: cost.Low.SI, c.likely: cost.Likely.SI, c.high: cost.High.SI}
	for field, v := range fields {
		if !cost.Given {
			field.SetValue("", "")
			continue
		}
		field.SetValue(station.Shown(ctx, v, cost.Likely.Unit, units.Money), "")
	}
	if !cost.Given {
		c.likely.SetValue("", "Not given yet; type it, such as 26000 "+currency(ctx).Symbol+"; low and high come after it.")
		for _, o := range c.rest {
			o.Hide()
		}
		return
	}
	for _, o := range c.rest {
		o.Show()
	}
	c.note.SetValue(cost.Note, "")
}
