package whole

import (
	"context"
	"io"
)

// tellBytes is how much is read between two tellings.
const tellBytes = 4 << 20

// Watch reads from in until ctx ends, and tells now and then how much it has read; tell may be nil.
func Watch(ctx context.Context, in io.Reader, tell func(done int64)) io.Reader {
	return &watched{ctx: ctx, in: in, tell: tell}
}

type watched struct {
	ctx        context.Context
	in         io.Reader
	done, told int64
	tell       func(done int64)
}

func (w *watched) Read(b []byte) (int, error) {
	if err := w.ctx.Err(); err != nil {
		return 0, err
	}
	n, err := w.in.Read(b)
	if w.done += int64(n); w.tell != nil && w.done-w.told >= tellBytes {
		w.told = w.done
		w.tell(w.done)
	}
	return n, err
}
