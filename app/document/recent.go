package document

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"slices"
)

// keepRecent is how many recent files a menu has room for.
const keepRecent = 8

// Recent lists the files that were opened or saved last, the newest first, without
// those that are gone.
func (d *Document) Recent() []string {
	var out []string
	for _, path := range d.readRecent() {
		if _, err := os.Stat(path); err == nil && len(out) < keepRecent {
			out = append(out, path)
		}
	}
	return out
}

func (d *Document) recentPath() string { return filepath.Join(d.opt.Config, "recent.json") }

// readRecent returns nothing when the list cannot be read: it is a convenience.
func (d *Document) readRecent() []string {
	if d.opt.Config == "" {
		return nil
	}
	data, err := os.ReadFile(d.recentPath())
	var list []string
	if err != nil || json.Unmarshal(data, &list) != nil {
		return nil
	}
	return list
}

// addRecent puts a path in front of the list. A list that cannot be written is no
// reason to disturb anybody.
func (d *Document) addRecent(path string) {
	if d.opt.Config == "" {
		return
	}
	list := append([]string{path}, slices.DeleteFunc(d.Recent(), func(p string) bool { return p == path })...)
	data, err := json.MarshalIndent(list[:min(len(list), keepRecent)], "", "  ")
	if err == nil && os.MkdirAll(d.opt.Config, 0o700) == nil {
		_ = copyTo(d.recentPath(), bytes.NewReader(data))
	}
}
