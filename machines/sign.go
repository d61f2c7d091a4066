package machines

// Sign returns -1, 0 or 1: at standstill no direction is preferred.
func Sign(x float64) float64 {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}
