package drawing

// queue hands states out by what a way through them is guessed to cost, and those of one
// guess in the order they came in. Guesses are small whole numbers: each has a list of its own.
type queue struct {
	lists []list // by guess
	items []item
	low   int32 // no list below holds anything
	high  int32 // none from here on
}

type list struct{ first, last int32 } // items, counted from 1; 0 = none

type item struct{ state, next int32 }

// dearest is the guess from which on states are handed out in the order they came in: a way
// through blocks for a hundred modules.
const dearest = 1 << 20

func (q *queue) empty() {
	clear(q.lists[:q.high])
	q.items, q.low, q.high = q.items[:0], 0, 0
}

func (q *queue) push(guess, state int32) {
	guess = min(guess, dearest)
	for int(guess) >= len(q.lists) {
		q.lists = append(q.lists, make([]list, 1+guess)...)
	}
	q.items = append(q.items, item{state, 0})
	n := int32(len(q.items))
	if l := &q.lists[guess]; l.first == 0 {
		*l = list{n, n}
	} else {
		q.items[l.last-1].next = n
		l.last = n
	}
	q.low = min(q.low, guess)
	q.high = max(q.high, guess+1)
}

// pop takes the state with the lowest guess, -1 when none is left.
func (q *queue) pop() int32 {
	for ; q.low < q.high; q.low++ {
		if l := &q.lists[q.low]; l.first != 0 {
			it := q.items[l.first-1]
			l.first = it.next
			return it.state
		}
	}
	return -1
}
