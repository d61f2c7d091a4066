package audit

import (
	"strings"

	"barlitre/circuit/recording/logger"
)

// LikelyClock is how the times of another logger b are likely brought to those of a: as they
// are where both have dates; else a channel of one quantity that both have, of the same name
// before others, tells. The zero Clock also where there is none.
func LikelyClock(a, b logger.Recipe) (out Clock) {
	if a.Time.Form == logger.Dated && b.Time.Form == logger.Dated {
		return out
	}
	for _, x := range a.Channels {
		for _, y := range b.Channels {
			same := x.Quantity != "" && x.Quantity == y.Quantity && !x.Leave && !y.Leave && !x.Text && !y.Text
			if same && (out.Channel == "" || strings.EqualFold(x.Column, y.Column)) {
				out = Clock{Channel: x.Column, With: y.Column}
				if strings.EqualFold(x.Column, y.Column) {
					return out
				}
			}
		}
	}
	return out
}
