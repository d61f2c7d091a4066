package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"strings"

	"barlitre/audit"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// importAlso is another logger that the command line sets beside the first.
type importAlso struct {
	files []string
	clock *audit.Clock // nil = the one that is likely
	file  *logger.File
	as    logger.Recipe
}

// addAlso takes the files of another logger, FILE or FILE,FILE,... where it was split.
func (c *importCall) addAlso(text string) error {
	files, err := listed(strings.Split(text, ","))
	c.also = append(c.also, &importAlso{files: files})
	return err
}

// setClock says how the clock of the logger named last is set.
func (c *importCall) setClock(text string) error {
	if len(c.also) == 0 {
		return errors.New("write it after the -also that it is meant for")
	}
	clock := &audit.Clock{}
	if first, second, ok := strings.Cut(text, "="); ok {
		clock.Channel, clock.With = strings.TrimSpace(first), strings.TrimSpace(second)
	} else {
		x, u, err := units.ParseLoose(text, units.Time, units.Preferred(units.Time, units.SI))
		if err != nil {
			return err
		}
		clock.Offset = units.FileText(x, u)
	}
	c.also[len(c.also)-1].clock = clock
	return nil
}

// openAlso opens and guesses the further loggers.
func (c *importCall) openAlso(first logger.Recipe) (err error) {
	for _, a := range c.also {
		if a.file, err = logger.OpenFiles(a.files...); err != nil {
			return err
		}
		if a.as = a.file.Guess(); a.clock == nil {
			likely := audit.LikelyClock(first, a.as)
			a.clock = &likely
		}
	}
	return nil
}

// answered answers a question of the first recording, or of the first further logger that has it open.
func (c *importCall) answered(r *logger.Recipe, field, choice string) error {
	err := r.Answer(field, choice)
	for _, a := range c.also {
		if err == nil {
			return nil
		}
		if a.as.Answer(field, choice) == nil {
			err = nil
		}
	}
	return err
}

// beside reads the further loggers and sets their channels beside those of the first.
func (c *importCall) beside(ctx context.Context, rec *logger.Recording, out, errs io.Writer) (*logger.Recording, []audit.Also, error) {
	var list []audit.Also
	for _, a := range c.also {
		fmt.Fprintln(out)
		printRecipe(out, a.file, a.as)
		printQuestions(out, a.as)
		other, err := a.file.Import(ctx, a.as, progressLine(errs))
		if err != nil {
			return nil, nil, err
		}
		printRecording(out, other)
		one := audit.Also{Files: basesOf(a.files), Recipe: a.as, Clock: *a.clock}
		if rec, err = one.Attach(rec, other); err != nil {
			return nil, nil, fmt.Errorf("%s: %w", other.Name, err)
		}
		heading(out, "Beside the first")
		if one.Unclear {
			one.How = "⚠ " + one.How
		}
		wrap(out, one.How)
		list = append(list, one)
	}
	return rec, list, nil
}
