package main

import (
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"barlitre/audit"
)

// printReport writes the report for a terminal: the decision, where the energy
// goes, findings and cautions. It decides nothing.
func printReport(w io.Writer, r *audit.Report) {
	fmt.Fprintln(w, r.Title)
	if r.Site.Note != "" {
		fmt.Fprintln(w, r.Site.Note)
	}
	for _, d := range r.Decisions {
		printDecision(w, d)
	}
	for _, c := range r.Circuits {
		printCircuit(w, c)
	}
	if len(r.Warmth) > 0 {
		heading(w, "Oil temperature and cooler")
		for _, t := range r.Warmth {
			auditTable(w, t)
		}
	}
	if len(r.Recordings.Rows) > 0 {
		heading(w, r.Recordings.Title)
		for _, row := range r.Recordings.Rows {
			wrap(w, row.Cells[0]+": "+row.Cells[1])
		}
	}
	if len(r.Findings) > 0 {
		heading(w, "Findings")
		for _, f := range r.Findings {
			fmt.Fprintf(w, "  %-7s %s: %s\n", f.Level, whereFound(f), f.Text)
		}
	}
	heading(w, "Cautions")
	for _, c := range r.Cautions {
		where := ""
		if c.Circuit != "" {
			where = c.Circuit + ", "
		}
		if c.Block != "" {
			where += c.Block + ", "
		}
		wrap(w, where+c.Topic+": "+c.Text)
	}
}

func printDecision(w io.Writer, d audit.Decision) {
	heading(w, d.Proposal+" against "+d.Base)
	wrap(w, d.Verdict)
	rows := [][]string{{"", d.Base, d.Proposal, "saved"}}
	for _, r := range d.Rows {
		rows = append(rows, []string{r.Name, r.Before.Text, r.After.Text, r.Change.Text})
	}
	table(w, rows)
	rows = nil
	for _, f := range d.Outcome {
		rows = append(rows, []string{f.Name, f.Text})
	}
	table(w, rows)
	for _, text := range []string{d.Cooler, d.Oil} {
		if text != "" {
			wrap(w, text)
		}
	}
	for _, s := range d.Warnings {
		wrap(w, "⚠ "+s)
	}
	if d.Published.Known {
		wrap(w, strings.TrimSpace(d.Published.Text+" "+d.Published.Explanation))
	}
	auditTable(w, d.Source)
	auditTable(w, d.Shortfalls)
}

func printCircuit(w io.Writer, c audit.CircuitPage) {
	heading(w, c.Name+" ("+c.Role+")")
	if !c.Solved {
		fmt.Fprintln(w, "  could not be solved; see the findings")
		return
	}
	for _, figures := range [][]audit.Figure{c.Year, c.Heat} {
		var rows [][]string
		for _, f := range figures {
			rows = append(rows, []string{f.Name, f.Text})
		}
		table(w, rows)
	}
	auditTable(w, c.States)
	auditTable(w, c.Calendar)
	auditTable(w, c.Services)
	auditTable(w, c.Losses)
	for _, d := range c.Duties {
		fmt.Fprintf(w, "\n  One cycle of %s\n", d.Name)
		var rows [][]string
		for _, f := range d.Figures {
			rows = append(rows, []string{f.Name, f.Text})
		}
		table(w, rows)
		auditTable(w, d.Losses)
		auditTable(w, d.Work)
		auditTable(w, d.Measured)
		printGates(w, d.Gates)
	}
}

// printGates writes a paragraph a gate: the reasons are too long for columns.
func printGates(w io.Writer, t audit.Table) {
	if len(t.Rows) == 0 {
		return
	}
	fmt.Fprintf(w, "\n  %s\n", t.Title)
	for _, r := range t.Rows {
		text := fmt.Sprintf("%s: %s asked, limit %s", r.Cells[0], r.Cells[1], r.Cells[2])
		if r.Cells[3] != "" {
			text += ", " + r.Cells[3]
		}
		wrap(w, text+" ("+r.Cells[4]+")")
	}
}

func auditTable(w io.Writer, t audit.Table) {
	if len(t.Rows) == 0 {
		return
	}
	fmt.Fprintf(w, "\n  %s\n", t.Title)
	rows := [][]string{t.Head}
	for _, r := range t.Rows {
		rows = append(rows, r.Cells)
	}
	table(w, rows)
	if t.Note != "" {
		wrap(w, t.Note)
	}
}

func heading(w io.Writer, text string) {
	fmt.Fprintf(w, "\n%s\n%s\n", text, strings.Repeat("─", utf8.RuneCountInString(text)))
}

// table aligns the first column left and the others right.
func table(w io.Writer, rows [][]string) {
	var width []int
	for _, r := range rows {
		for i, c := range r {
			if i == len(width) {
				width = append(width, 0)
			}
			width[i] = max(width[i], utf8.RuneCountInString(c))
		}
	}
	for _, r := range rows {
		line := ""
		for i, c := range r {
			pad := strings.Repeat(" ", width[i]-utf8.RuneCountInString(c))
			if i == 0 {
				line += "  " + c + pad
			} else {
				line += "  " + pad + c
			}
		}
		fmt.Fprintln(w, strings.TrimRight(line, " "))
	}
}

// wrap writes a paragraph of at most 100 characters a line.
func wrap(w io.Writer, text string) {
	const width = 100
	line := "  "
	for _, word := range strings.Fields(text) {
		if utf8.RuneCountInString(line)+utf8.RuneCountInString(word) > width && strings.TrimSpace(line) != "" {
			fmt.Fprintln(w, strings.TrimRight(line, " "))
			line = "  "
		}
		line += word + " "
	}
	if strings.TrimSpace(line) != "" {
		fmt.Fprintln(w, strings.TrimRight(line, " "))
	}
}
