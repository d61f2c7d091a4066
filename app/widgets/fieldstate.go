package widgets

// DumpText is what stands in the field, for scripts; a refused text is marked.
func (f *Field) DumpText() string {
	if f.bad {
		return f.Text + " (refused)"
	}
	return f.Text
}
