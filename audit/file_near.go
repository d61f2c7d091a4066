package audit

import (
	"fmt"
	"strings"
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

// fewWords is how many known words a message lists beside its guess.
const fewWords = 5

// guess ends a message about an unknown word: the nearest known one, and all of
// them where they are few or none is near.
func guess(word string, known []string) string {
	var text string
	n := nearest(word, known)
	if n != "" {
		text = fmt.Sprintf("; did you mean %q?", n)
	}
	if len(known) > 0 && (n == "" || len(known) <= fewWords) {
		text += "; known here: " + strings.Join(known, ", ")
	}
	return strings.Replace(text, "?;", "?", 1)
}
