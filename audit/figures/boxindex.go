package figures

import (
	"math"

	"barlitre/circuit/drawing"
)

// boxIndex finds boxes near a place without going through all of them.
type boxIndex struct {
	boxes []drawing.Box
	cells map[[2]int32][]int32
	met   []int32 // by box: the search that met it last
	run   int32
}

const indexCell = 8 // [M]

func cellsOf(b drawing.Box) (x0, y0, x1, y1 int32) {
	at := func(v float64) int32 { return int32(math.Floor(v / indexCell)) }
	return at(b.Min.X), at(b.Min.Y), at(b.Max.X), at(b.Max.Y)
}

func (x *boxIndex) add(b drawing.Box) {
	if x.cells == nil {
		x.cells = map[[2]int32][]int32{}
	}
	n := int32(len(x.boxes))
	x.boxes, x.met = append(x.boxes, b), append(x.met, 0)
	x0, y0, x1, y1 := cellsOf(b)
	for cy := y0; cy <= y1; cy++ {
		for cx := x0; cx <= x1; cx++ {
			x.cells[[2]int32{cx, cy}] = append(x.cells[[2]int32{cx, cy}], n)
		}
	}
}

// near calls do with every box that may touch b, each once, until it returns false.
func (x *boxIndex) near(b drawing.Box, do func(i int) bool) {
	x.run++
	x0, y0, x1, y1 := cellsOf(b)
	if float64(x1-x0+1)*float64(y1-y0+1) > float64(len(x.boxes)) { // all is quicker
		for i := range x.boxes {
			if !do(i) {
				return
			}
		}
		return
	}
	for cy := y0; cy <= y1; cy++ {
		for cx := x0; cx <= x1; cx++ {
			for _, i := range x.cells[[2]int32{cx, cy}] {
				if x.met[i] == x.run {
					continue
				}
				x.met[i] = x.run
				if !do(int(i)) {
					return
				}
			}
		}
	}
}
