package logger

import "math"

// column keeps the values of a channel as they stand in the file, NaN where there is none.
// A chunk whose values have a fixed number of decimals is kept as whole numbers of 16 or 32
// bits, which read back exactly; others as they are.
type column struct {
	full     []chunk
	now      []float64
	decimals int // most of now; -1 = not to be packed
}

type chunk struct {
	small []uint16
	whole []int32
	plain []float64
	base  float64
	scale float64
}

const (
	chunkRows = 1 << 13
	noSmall   = math.MaxUint16
	noWhole   = math.MinInt32
)

// add appends a value that was written with so many decimals, -1 = not known.
func (c *column) add(x float64, decimals int) {
	if c.now == nil {
		c.now = make([]float64, 0, chunkRows)
	}
	if decimals < 0 && x == x {
		c.decimals = -1
	} else if c.decimals >= 0 && decimals > c.decimals {
		c.decimals = decimals
	}
	if c.now = append(c.now, x); len(c.now) == chunkRows {
		c.seal()
	}
}

func (c *column) seal() {
	if k, ok := packed(c.now, c.decimals); ok {
		c.full, c.now = append(c.full, k), c.now[:0]
	} else {
		c.full, c.now = append(c.full, chunk{plain: c.now}), nil
	}
	c.decimals = 0
}

// packed makes whole numbers of values, if they then read back exactly.
func packed(v []float64, decimals int) (k chunk, ok bool) {
	if decimals < 0 || decimals > 9 {
		return k, false
	}
	k.scale = pow10[decimals]
	low, high := math.Inf(1), math.Inf(-1)
	for _, x := range v {
		if x != x {
			continue
		}
		m := math.Round(x * k.scale)
		if m/k.scale != x || m == 0 && math.Signbit(x) {
			return k, false
		}
		low, high = math.Min(low, m), math.Max(high, m)
	}
	switch {
	case low > high: // no value at all
		k.base = 0
		fallthrough
	case high-low < noSmall:
		if low <= high {
			k.base = low
		}
		k.small = make([]uint16, len(v))
		for i, x := range v {
			if k.small[i] = noSmall; x == x {
				k.small[i] = uint16(math.Round(x*k.scale) - k.base)
			}
		}
	case low > math.MinInt32 && high <= math.MaxInt32:
		k.whole = make([]int32, len(v))
		for i, x := range v {
			if k.whole[i] = noWhole; x == x {
				k.whole[i] = int32(math.Round(x * k.scale))
			}
		}
	default:
		return k, false
	}
	return k, true
}

func (c *column) at(i int) float64 {
	k, j := i/chunkRows, i%chunkRows
	if k == len(c.full) {
		return c.now[j]
	}
	return c.full[k].at(j)
}

func (k *chunk) at(j int) float64 {
	switch {
	case k.plain != nil:
		return k.plain[j]
	case k.small != nil:
		if k.small[j] == noSmall {
			return math.NaN()
		}
		return (float64(k.small[j]) + k.base) / k.scale
	case k.whole[j] == noWhole:
		return math.NaN()
	}
	return float64(k.whole[j]) / k.scale
}
