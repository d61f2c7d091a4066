package intake

import (
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit/recording/logger"
)

// fillQuestions asks what the file leaves open.
func (f *form) fillQuestions() {
	f.questions.Objects = nil
	for _, q := range f.p.src().recipe.Open() {
		f.questions.Add(say("⚠ "+q.Text, widget.DangerImportance, false))
		f.questions.Add(f.answerTo(q))
	}
	f.questions.Refresh()
}

// answerTo is a list of choices, or a field where an answer is free.
func (f *form) answerTo(q logger.Question) fyne.CanvasObject {
	name := "intake.question." + q.Field
	if len(q.Choices) == 0 {
		return widgets.Name(widgets.NewField("", func(text string) error { return f.p.answer(q.Field, text) }), name)
	}
	c := f.p.newChoice(name, q.Choices, nil, func(word string) {
		if err := f.p.answer(q.Field, word); err != nil {
			f.p.ctx.Fail(err)
		}
	})
	c.PlaceHolder = "Choose"
	return c.Select
}

// blocking are the questions without whose answer nothing is read. What a signal means can
// be told later: until then it is read in mA.
func (p *Page) blocking() (out []logger.Question) {
	for _, s := range p.sources {
		out = append(out, s.blocking()...)
	}
	return out
}

func (s *source) blocking() []logger.Question {
	return slices.DeleteFunc(s.recipe.Open(), func(q logger.Question) bool { return strings.HasSuffix(q.Field, logger.ScalingField) })
}

// unscaled is a recipe by which signals of unknown meaning are read in mA.
func unscaled(r logger.Recipe) logger.Recipe {
	r = cloned(r)
	for _, q := range r.Open() {
		if strings.HasSuffix(q.Field, logger.ScalingField) {
			r.Questions = slices.Clone(r.Questions)
			_ = r.Answer(q.Field, "mA") // always taken of a question that is open
		}
	}
	return r
}

func (p *Page) answer(field, word string) error {
	if field == "separator" {
		p.restructure(func(r *logger.Recipe) { r.Separator, r.Questions = word, nil })
		return nil
	}
	r := cloned(p.src().recipe)
	r.Questions = slices.Clone(r.Questions)
	if err := r.Answer(field, word); err != nil {
		return err
	}
	p.src().recipe = r
	p.read()
	return nil
}
