package whole

import (
	"bytes"
	"context"
	"errors"
	"io"
	"testing"
)

// A watched reader hands on what it reads, tells of it, and ends with its context.
func TestWatch(t *testing.T) {
	data := bytes.Repeat([]byte("0123456789abcdef"), 1<<20) // 16 MiB
	ctx, end := context.WithCancel(context.Background())
	var told []int64
	r := Watch(ctx, bytes.NewReader(data), func(done int64) { told = append(told, done) })
	half := make([]byte, len(data)/2)
	for at := 0; at < len(half); at += 1 << 20 {
		if _, err := io.ReadFull(r, half[at:at+1<<20]); err != nil {
			t.Fatal(err)
		}
	}
	if !bytes.Equal(half, data[:len(half)]) || len(told) != 2 || told[0] != 4<<20 || told[1] != 8<<20 {
		t.Errorf("told %d of half of 16 MiB", told)
	}
	end()
	if n, err := r.Read(half); n != 0 || !errors.Is(err, context.Canceled) {
		t.Errorf("read %d bytes after the end, %v", n, err)
	}
}
