package units

// DecimalComma writes the numbers in a text with a decimal comma: every point between two
// digits becomes one.
func DecimalComma(text string) string {
	b := []rune(text)
	for i := 1; i+1 < len(b); i++ {
		if b[i] == '.' && digit(b[i-1]) && digit(b[i+1]) {
			b[i] = ','
		}
	}
	return string(b)
}

func digit(r rune) bool { return r >= '0' && r <= '9' }
