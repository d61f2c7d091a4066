package audit

import (
	"fmt"
	"slices"
	"strings"

	"barlitre/circuit"
)

// nearest returns the known word that an unknown one was likely meant to be, or "".
func nearest(word string, known []string) string {
	best, bestDist := "", 1+len([]rune(word))/3
	w := fold(word)
	for _, k := range known {
		if d := distance(w, fold(k)); d <= bestDist && (best == "" || d < bestDist) {
			best, bestDist = k, d
		}
	}
	return best
}

// calledSo returns the known word whose title was written in its place, or is nearest to what was, or "".
func calledSo(word string, known []string, title func(string) string) string {
	for _, w := range strings.Fields(strings.ToLower(word)) { // "hydraulic cylinder" is a cylinder
		if slices.Contains(known, w) && title(w) != "" {
			return w
		}
	}
	var called []string
	of := map[string]string{}
	for _, k := range known {
		if t := title(k); t != "" {
			called, of[t] = append(called, t), k
		}
	}
	return of[nearest(word, called)]
}

// fold drops what people mix up: case, and what joins words.
func fold(s string) []rune {
	return []rune(strings.NewReplacer("-", "_", " ", "_").Replace(strings.ToLower(s)))
}

// distance counts the letters to add, drop, change or swap with a neighbour to
// turn a into b (optimal string alignment).
func distance(a, b []rune) int {
	if len(a) > 64 || len(b) > 64 {
		return 64 // no word of the format is that long
	}
	rows := make([][]int, len(a)+1)
	for i := range rows {
		rows[i] = make([]int, len(b)+1)
		rows[i][0] = i
	}
	for j := range b {
		rows[0][j+1] = j + 1
	}
	for i := range a {
		for j := range b {
			d := rows[i][j]
			if a[i] != b[j] {
				d++
			}
			d = min(d, rows[i][j+1]+1, rows[i+1][j]+1)
			if i > 0 && j > 0 && a[i] == b[j-1] && a[i-1] == b[j] {
				d = min(d, rows[i-1][j-1]+1)
			}
			rows[i+1][j+1] = d
		}
	}
	return rows[len(a)][len(b)]
}

// namedAll names words as the window does, each with its word in brackets.
func namedAll(words []string, title func(string) string) []string {
	var out []string
	for _, w := range words {
		name := w
		if t := title(w); t != "" {
			name = circuit.WithWord(t, w)
		}
		out = append(out, name)
	}
	return out
}

// fewWords is how many known words a message lists beside its guess.
const fewWords = 5

// guess ends a message about an unknown word: the nearest known one, and all of
// them where they are few or none is near.
func guess(word string, known []string) string {
	return guessOf(word, known, func(string) string { return "" })
}

// guessOf is guess for words that are called something else in the window, which may be what was written.
func guessOf(word string, known []string, title func(string) string) string {
	var text string
	n := nearest(word, known)
	if n == "" {
		n = calledSo(word, known, title)
	}
	if called := title(n); n != "" && called != "" && !strings.EqualFold(called, n) {
		text = "; did you mean " + circuit.WithWord(called, n) + "?"
	} else if n != "" {
		text = fmt.Sprintf("; did you mean %q?", n)
	}
	if len(known) > 0 && (n == "" || len(known) <= fewWords) {
		text += "; known here: " + strings.Join(namedAll(known, title), ", ")
	}
	return strings.Replace(text, "?;", "?", 1)
}
