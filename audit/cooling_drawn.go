package audit

// coolingDrawn sums what fan and pumps of the cooling draw: all of it is booked as lost. Where an engine drives them that is
// the fuel burnt for it.
func coolingDrawn(rows []LossRow) Split {
	var sum Split
	for _, l := range rows {
		if l.Block == coolingBlock {
			sum = sum.Plus(l.Energy)
		}
	}
	return sum
}

// CoolingDrawn is what fan and pumps of the cooling draw in a cycle [J], part of SupplyIn.
func (b *Balance) CoolingDrawn() Split { return coolingDrawn(b.Losses) }

// CoolingDrawn is what fan and pumps of the cooling draw in a year [J], part of Drawn.
func (y *Year) CoolingDrawn() Split { return coolingDrawn(y.Losses) }
