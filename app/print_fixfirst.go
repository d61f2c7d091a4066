package main

import (
	"fmt"
	"io"

	"barlitre/audit/fixfirst"
)

// printFixFirst writes what is to be put right first; the details only where asked for.
func printFixFirst(w io.Writer, p fixfirst.Page, details bool) {
	heading(w, "Fix first: "+p.Circuit)
	wrap(w, p.Verdict)
	auditTable(w, p.Ladder())
	for _, s := range p.Splits {
		fmt.Fprintln(w)
		wrap(w, s.Text)
		auditTable(w, s.Table())
	}
	if !details {
		if len(p.Items) > 0 {
			wrap(w, "barlitre fixfirst FILE tells the evidence, what to do and the cautions.")
		}
		return
	}
	for _, it := range p.Items {
		printFixItem(w, it)
	}
}

func printFixItem(w io.Writer, it fixfirst.Item) {
	fmt.Fprintf(w, "\n  %d. %s\n", it.Number, it.Head)
	wrap(w, it.Text)
	rows := [][]string{{"", "found", "should be"}}
	for _, q := range it.Evidence {
		rows = append(rows, []string{q.Name, q.Found, q.Limit})
	}
	table(w, rows)
	for _, part := range [][2]string{{"Where", it.Where}, {"Do", it.Do}, {"Caution", it.Caution}, {"Worth", it.Price}, {"Note", it.Note}, {"Priced with", it.Cure}, {"Limit", it.Basis}} {
		if part[1] != "" {
			wrap(w, part[0]+": "+part[1])
		}
	}
}
