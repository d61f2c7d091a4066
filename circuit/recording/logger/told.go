package logger

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"
)

// told is what people say of a recording, to be laid over a guess.
type told struct {
	Answers  map[string]string    `yaml:"answers"`
	Recipe   yaml.Node            `yaml:"recipe"`
	Channels map[string]yaml.Node `yaml:"channels"`
}

// Tell lays over a recipe what somebody knows of the recording, as YAML:
//
//	answers: {order: dmy, "AI1: scaling": 0 to 250 bar}     questions, by field
//	recipe: {air_pa: 101300, time: {pauses_s: [42, 7.5]}}   keys of a Recipe that are said otherwise
//	channels:                                               the same for keys of a Channel, by column
//	  AI2: {quantity: flow, unit: L/min, scaling: {signal: mA, from: [4, 20], to: [-120, 120]}}
//
// What is not said stays as it was.
func (r *Recipe) Tell(text []byte) error {
	var says told
	if err := strictly(text, &says); err != nil {
		return err
	}
	if err := over(says.Recipe, r); err != nil {
		return fmt.Errorf("recipe: %w", err)
	}
	for column, n := range says.Channels {
		c := r.Channel(column)
		if c == nil {
			return fmt.Errorf("channels: there is no channel %q; the recipe has %q", column, r.columns())
		}
		if err := over(n, c); err != nil {
			return fmt.Errorf("channel %q: %w", column, err)
		}
	}
	for field, choice := range says.Answers {
		if err := r.Answer(field, choice); err != nil {
			return err
		}
	}
	return nil
}

// strictly decodes, and takes a key that it does not know for a slip.
func strictly(text []byte, to any) error {
	d := yaml.NewDecoder(bytes.NewReader(text))
	d.KnownFields(true)
	if err := d.Decode(to); err != nil && !errors.Is(err, io.EOF) {
		return errors.New(strings.TrimPrefix(strings.Join(strings.Fields(err.Error()), " "), "yaml: "))
	}
	return nil
}

// over lays keys over a value.
func over(n yaml.Node, to any) error {
	if n.IsZero() {
		return nil
	}
	text, err := yaml.Marshal(&n)
	if err != nil {
		return err
	}
	return strictly(text, to)
}

func (r *Recipe) columns() (names []string) {
	for _, c := range r.Channels {
		names = append(names, c.Column)
	}
	slices.Sort(names)
	return names
}
