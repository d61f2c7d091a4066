package document

import (
	"barlitre/audit/cure"
	"barlitre/circuit"
)

// Cure returns what mends a finding of the present revision, or nil.
func (d *Document) Cure(f circuit.Finding) *cure.Cure {
	s, _ := d.Solution()
	return cure.Of(d.File(), s, f)
}

// Mend does a cure, as one step of undo.
func (d *Document) Mend(c *cure.Cure) error { return d.Edit(c.Name, c.Mend) }
