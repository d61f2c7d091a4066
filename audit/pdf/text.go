package pdf

import (
	"image/color"
	"strings"

	"barlitre/audit/pen"
)

// Sizes of text [mm].
const (
	textSize  = 3.0
	smallSize = 2.5
	tableSize = 2.75
	lineRatio = 1.36 // distance of lines over size
)

// style is how a text looks.
type style struct {
	size float64
	bold bool
	c    color.NRGBA
}

func (st style) line() float64 { return lineRatio * st.size }

// base is the distance from the top of a line to its baseline.
func (st style) base() float64 { return 0.98 * st.size }

func (s *sheet) body() style  { return style{size: textSize, c: s.pal.Ink} }
func (s *sheet) small() style { return style{size: smallSize, c: s.pal.Secondary} }

// wrap breaks a text into lines no wider than width. It breaks at spaces and at
// line feeds; a word that is wider is cut after a sign that joins words, or
// between letters. There is at least one line.
func (st style) wrap(text string, width float64) []string {
	var out []string
	text = strings.ToValidUTF8(text, string(pen.Replacement))
	for _, part := range strings.Split(text, "\n") {
		out = append(out, st.wrapPart(pen.Clean(part), width)...)
	}
	return out
}

func (st style) wrapPart(text string, width float64) []string {
	var out []string
	line, used, space := "", 0.0, st.width(" ")
	for _, word := range words(text) {
		w := st.width(word)
		if line != "" && used+space+w <= width {
			line, used = line+" "+word, used+space+w
			continue
		}
		if line != "" {
			out = append(out, line)
		}
		for line, used = word, w; used > width; used = st.width(line) {
			n := st.cut(line, width)
			if n == len(line) {
				break // one letter, wider than the room
			}
			out = append(out, line[:n])
			line = line[n:]
		}
	}
	return append(out, line)
}

// words splits at plain spaces only: a narrow space joins a number to its unit.
func words(text string) []string {
	return strings.FieldsFunc(text, func(r rune) bool { return r == ' ' })
}

func (st style) width(text string) float64 { return pen.TextWidth(text, st.size, st.bold) }

// cut returns how many bytes of a word go on a line: at least one letter.
func (st style) cut(word string, width float64) int {
	used, end, joint := 0.0, 0, 0
	for i, r := range word {
		used += st.width(string(r))
		if used > width && i > 0 {
			break
		}
		end = i + len(string(r))
		if strings.ContainsRune("/-_.,;:·", r) {
			joint = end
		}
	}
	if joint > end/2 {
		return joint
	}
	return end
}

// longestWord returns the width of the widest part that wrap keeps together.
func (st style) longestWord(text string) float64 {
	most := 0.0
	for _, w := range words(pen.Clean(text)) { // a line feed is cleaned to a space
		most = max(most, st.width(w))
	}
	return most
}

// begin returns the height of the lines that stay together at the start of n.
func (st style) begin(n int) float64 {
	if n > 3 {
		n = 2
	}
	return float64(n) * st.line()
}

// lines draws lines at x from s.y down, over pages where needed; two lines at
// least stay together.
func (s *sheet) lines(x float64, lines []string, st style) {
	for i, t := range lines {
		switch i {
		case 0:
			s.need(st.begin(len(lines)))
		case len(lines) - 2:
			s.need(2 * st.line())
		default:
			s.need(st.line())
		}
		s.put(x, s.y+st.base(), t, st, pen.Left)
		s.y += st.line()
	}
}

// para writes a paragraph over the full width.
func (s *sheet) para(text string, st style) {
	s.lines(side, st.wrap(text, fullW), st)
	s.y += 1.2 * s.room
}

// lead writes a paragraph at x that begins with bold words.
func (s *sheet) lead(x float64, word, text string, st style) {
	bold := st
	bold.bold = true
	word = pen.Clean(word)
	w, indent := side+fullW-x, bold.width(word+" ")
	if indent > w/2 {
		s.lines(x, append(bold.wrap(word, w), st.wrap(text, w)...), st)
		s.y += 1.2 * s.room
		return
	}
	// Spaces as wide as the bold words keep their place on the first line.
	blank := strings.Repeat("\u00a0", int(indent/st.width("\u00a0")+0.999))
	lines := st.wrap(blank+text, w)
	s.need(st.begin(len(lines)))
	s.put(x, s.y+st.base(), word, bold, pen.Left)
	s.lines(x, lines, st)
	s.y += 1.2 * s.room
}

// bullets writes a list.
func (s *sheet) bullets(items []string, st style) {
	for _, t := range items {
		lines := st.wrap(t, fullW-4)
		s.need(st.begin(len(lines)))
		s.p.Circle(pen.Pt{X: side + 1.1, Y: s.y + st.base() - 0.36*st.size}, 0.45, s.pal.Secondary, pen.Stroke{})
		s.lines(side+4, lines, st)
		s.y += 0.7 * s.room
	}
}

// head is how a heading looks.
func (s *sheet) head(level int) style {
	return style{size: [...]float64{5, 3.8, 3.2}[level-1], bold: true, c: s.pal.Ink}
}

// headLines returns the lines of a heading and how high they are.
func (s *sheet) headLines(level int, text string) ([]string, float64) {
	lines := s.head(level).wrap(text, fullW)
	return lines, s.head(level).line() * float64(len(lines))
}

// heading writes a heading of level 1 to 3 and keeps it with the next follow mm.
func (s *sheet) heading(level int, text string, follow float64) {
	before, after := 3.0, 0.8
	switch level {
	case 1:
		before, after = 9, 3
	case 2:
		before, after = 5.5, 1.2
	}
	st := s.head(level)
	lines, h := s.headLines(level, text)
	s.need(before*s.room + h + after + follow)
	s.gap(before)
	if level < 3 {
		s.to.mark(text, level-1, s.y)
	}
	s.lines(side, lines, st)
	if level == 1 {
		s.y += 0.6
		s.fill(side, s.y, 14, 0.7, s.accent)
	}
	s.y += after * s.room
}
