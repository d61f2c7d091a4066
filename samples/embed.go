// Package samples holds audit files to start from and to learn on. Every machine,
// name and number in them is invented, and each file says so. README.md tells what
// each shows.
package samples

import (
	"embed"
	"fmt"
	"io/fs"
	"slices"
	"strings"
)

//go:embed *.yaml
var files embed.FS

// Names lists the audit files, in the order of the alphabet; a fresh slice.
func Names() []string {
	names, err := fs.Glob(files, "*.yaml")
	if err != nil { // excluded: the pattern is well formed
		return nil
	}
	slices.Sort(names)
	return names
}

// Read returns an audit file by a name that Names lists; the caller may change the
// bytes. An unknown name is an error that lists the known ones.
func Read(name string) ([]byte, error) {
	data, err := files.ReadFile(name)
	if err != nil {
		return nil, fmt.Errorf("there is no sample %q; the samples are %s", name, strings.Join(Names(), ", "))
	}
	return data, nil
}
