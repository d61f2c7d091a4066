package document

import (
	"strings"

	"barlitre/audit"
	"barlitre/circuit"
)

// setName says in words what Set changes: "Change RV1: cracks at". For a target that
// Set will refuse it says something all the same.
func setName(f *audit.File, target string) string {
	where, rest := "", target
	if i := strings.LastIndex(target, "/"); i >= 0 {
		where, rest = target[:i], target[i+1:]
	}
	words := strings.Split(rest, ".")
	of := ""
	if where != "" {
		of = " (" + where + ")"
	}
	kind := kindOf(f, where, words[0])
	if kind == nil || len(words) < 2 {
		return "Change " + strings.ReplaceAll(strings.Join(words, " "), "_", " ") + of
	}
	switch words[1] {
	case "turn":
		return "Turn " + words[0] + of
	case "mirror":
		return "Mirror " + words[0] + of
	}
	what := strings.ReplaceAll(words[1], "_", " ")
	if p := kind.Param(words[1]); p != nil {
		what = circuit.InSentence(p.Title)
	}
	if len(words) > 2 {
		what += ", " + words[2]
	}
	return "Change " + words[0] + ": " + what + of
}

// kindOf returns the kind of the first block with an id, in one circuit or with ""
// in any; nil when there is none.
func kindOf(f *audit.File, where, id string) *circuit.Kind {
	for _, c := range f.Circuits {
		if where != "" && c.Name != where {
			continue
		}
		if b := c.Block(id); b != nil {
			return circuit.KindNamed(b.Kind)
		}
	}
	return nil
}
