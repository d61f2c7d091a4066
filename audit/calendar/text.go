package calendar

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// DayNames are the days of the week as the file writes them.
var DayNames = [7]string{"Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun"}

// Clock writes a time of day, "06:00".
func Clock(t float64) string {
	m := int(math.Round(t / 60))
	if m > 24*60 {
		m %= 24 * 60
	}
	return fmt.Sprintf("%02d:%02d", m/60, m%60)
}

// span writes how long something lasts, "30 min" or "8.5 h".
func span(t float64) string {
	if t < Hour {
		return strconv.FormatFloat(math.Round(t/6)/10, 'f', -1, 64) + " min"
	}
	return strconv.FormatFloat(math.Round(t/36)/100, 'f', -1, 64) + " h"
}

// ParseClock reads a time of day, "6:00", "06.30" or "24:00" [s after midnight].
func ParseClock(text string) (float64, error) {
	h, m, ok := strings.Cut(strings.Replace(strings.TrimSpace(text), ".", ":", 1), ":")
	hours, err1 := strconv.Atoi(strings.TrimSpace(h))
	minutes, err2 := strconv.Atoi(m)
	if !ok || err1 != nil || err2 != nil || len(m) != 2 || hours < 0 || minutes < 0 || minutes > 59 || hours*60+minutes > 24*60 {
		return 0, fmt.Errorf("%q is no time of day; write 06:00, up to 24:00", text)
	}
	return float64(hours)*Hour + float64(minutes)*60, nil
}

// ParseBreak reads "09:00 - 09:15"; false where it is not of that form.
func ParseBreak(text string) (Break, bool, error) {
	a, b, ok := strings.Cut(strings.ReplaceAll(text, "–", "-"), "-")
	if !ok {
		return Break{}, false, nil
	}
	from, err := ParseClock(a)
	if err != nil {
		return Break{}, true, err
	}
	to, err := ParseClock(b)
	return Break{From: from, To: to}, true, err
}

// ParseDays reads days of the week: "Mon-Fri", "Mon, Wed, Sat", or how many from Monday on, "5".
func ParseDays(text string) (days [7]bool, err error) {
	fault := fmt.Errorf("%q are no days; write Mon-Fri, or Mon, Wed, Sat, or how many from Monday on", text)
	if n, err := strconv.Atoi(strings.TrimSpace(text)); err == nil {
		if n < 1 || n > 7 {
			return days, fault
		}
		for i := range n {
			days[i] = true
		}
		return days, nil
	}
	for _, part := range strings.Split(strings.ReplaceAll(text, "–", "-"), ",") {
		a, b, isRange := strings.Cut(part, "-")
		from, to := dayOf(a), dayOf(b)
		if !isRange {
			to = from
		}
		if from < 0 || to < 0 {
			return days, fault
		}
		for d := from; ; d = (d + 1) % 7 { // Sat-Mon goes over the end of the week
			days[d] = true
			if d == to {
				break
			}
		}
	}
	return days, nil
}

// dayOf finds a day by its first three letters or its full English name.
func dayOf(word string) int {
	word = strings.ToLower(strings.TrimSpace(word))
	full := []string{"monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday"}
	return slices.IndexFunc(full, func(d string) bool {
		return word == d || len(word) >= 3 && len(word) <= 4 && strings.HasPrefix(d, word)
	})
}

// DaysText writes days as ParseDays reads them.
func DaysText(days [7]bool) string {
	var parts []string
	for d := 0; d < 7; d++ {
		if !days[d] {
			continue
		}
		end := d
		for end+1 < 7 && days[end+1] {
			end++
		}
		switch {
		case end == d:
			parts = append(parts, DayNames[d])
		case end == d+1:
			parts = append(parts, DayNames[d], DayNames[end])
		default:
			parts = append(parts, DayNames[d]+"-"+DayNames[end])
		}
		d = end
	}
	return strings.Join(parts, ", ")
}

// BreakText writes a break as the file does.
func BreakText(b Break) string {
	if b.Lasts > 0 {
		return span(b.Lasts)
	}
	return Clock(b.From) + " - " + Clock(b.To)
}
