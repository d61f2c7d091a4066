package logger

import (
	"bytes"
	"io"
	"unicode/utf8"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
)

// File is a file that was opened: its ends are known, its rows are not.
type File struct {
	Name string // without its folder
	Size int64  // bytes

	parts      []part // one, or those that the recording was split into
	head, tail []byte // of the first and the last, as in the file
}

// What is looked at for a guess and a preview [bytes].
const (
	headBytes = 512 << 10
	tailBytes = 64 << 10
)

// Open looks at both ends of a file.
func Open(path string) (*File, error) {
	return OpenFiles(path)
}

// OpenBytes opens a file that is in memory.
func OpenBytes(name string, data []byte) (*File, error) {
	return OpenSource(name, int64(len(data)), func() (io.ReadCloser, error) { return io.NopCloser(bytes.NewReader(data)), nil })
}

// OpenSource opens what reopen gives from its start, again and again; size is in bytes.
func OpenSource(name string, size int64, reopen func() (io.ReadCloser, error)) (*File, error) {
	return OpenSources([]string{name}, []int64{size}, func(int) (io.ReadCloser, error) { return reopen() })
}

var marks = []struct {
	mark []byte
	name string
}{{[]byte{0xef, 0xbb, 0xbf}, "UTF-8"}, {[]byte{0xff, 0xfe}, "UTF-16 LE"}, {[]byte{0xfe, 0xff}, "UTF-16 BE"}}

// encodingOf guesses from a byte order mark, else from where zero bytes stand, else from
// whether the bytes are UTF-8.
func encodingOf(data []byte) (name, why string) {
	for _, m := range marks {
		if bytes.HasPrefix(data, m.mark) {
			return m.name, "it begins with a byte order mark"
		}
	}
	even, odd := 0, 0
	for i, c := range data {
		if c == 0 && i%2 == 0 {
			even++
		} else if c == 0 {
			odd++
		}
	}
	switch n := len(data); {
	case odd > n/4 && even < n/50:
		return "UTF-16 LE", "every second byte is zero"
	case even > n/4 && odd < n/50:
		return "UTF-16 BE", "every second byte is zero"
	}
	whole := data
	for cut := 0; cut < 4 && len(whole) > 0 && !utf8.Valid(whole); cut++ {
		whole = whole[:len(whole)-1] // the sample may end inside a sign
	}
	if utf8.Valid(whole) && (len(whole) > 0 || len(data) == 0) {
		return "UTF-8", ""
	}
	return "Windows-1252", "its bytes are not UTF-8"
}

func decoder(name string) encoding.Encoding {
	switch name {
	case "UTF-16 LE":
		return unicode.UTF16(unicode.LittleEndian, unicode.IgnoreBOM)
	case "UTF-16 BE":
		return unicode.UTF16(unicode.BigEndian, unicode.IgnoreBOM)
	case "Windows-1252":
		return charmap.Windows1252
	}
	return nil // UTF-8
}

// decoded turns a stream into UTF-8. The mark, if any, becomes one at the start of the first line.
func decoded(in io.Reader, name string) io.Reader {
	if d := decoder(name); d != nil {
		return d.NewDecoder().Reader(in)
	}
	return in
}

// text decodes a piece of the file.
func text(data []byte, name string) []byte {
	if d := decoder(name); d != nil {
		if out, err := d.NewDecoder().Bytes(data); err == nil {
			return out
		}
	}
	return data
}

var byteOrderMark = []byte("\ufeff")

// lines goes through text line by line; LF, CRLF and CR alone end a line.
type lines struct {
	in   io.Reader
	buf  []byte
	a, b int // what of buf is not yet given
	n    int // lines given
	err  error
	lf   bool // a CR ended the last line: an LF that follows belongs to it
}

const (
	lineBuffer = 1 << 20
	maxLine    = 16 << 20
)

func newLines(in io.Reader) *lines { return &lines{in: in, buf: make([]byte, lineBuffer)} }

// next returns a line, which holds until the next call; nil at the end.
func (l *lines) next() []byte {
	scanned := l.a
	for {
		if l.lf && l.a < l.b {
			if l.lf = false; l.buf[l.a] == '\n' {
				l.a++
			}
			scanned = max(scanned, l.a)
		}
		if i := indexEnd(l.buf[scanned:l.b]); i >= 0 {
			line := l.buf[l.a : scanned+i]
			l.lf = l.buf[scanned+i] == '\r'
			l.a = scanned + i + 1
			return l.given(line)
		}
		scanned = l.b
		if l.err != nil {
			if l.a == l.b {
				return nil
			}
			line := l.buf[l.a:l.b]
			l.a = l.b
			return l.given(line)
		}
		scanned -= l.a
		l.fill()
		scanned += l.a
	}
}

func (l *lines) given(line []byte) []byte {
	if l.n++; l.n == 1 {
		line = bytes.TrimPrefix(line, byteOrderMark)
	}
	if line == nil {
		line = []byte{}
	}
	return line
}

func (l *lines) fill() {
	copy(l.buf, l.buf[l.a:l.b])
	l.a, l.b = 0, l.b-l.a
	if l.b == len(l.buf) {
		if len(l.buf) >= maxLine {
			l.err = io.ErrShortBuffer
			return
		}
		l.buf = append(l.buf, make([]byte, len(l.buf))...)
	}
	n, err := l.in.Read(l.buf[l.b:])
	l.b += n
	l.err = err
}

// indexEnd finds the first LF or CR; LF are many and CR are few, or the other way round.
func indexEnd(b []byte) int {
	i := bytes.IndexByte(b, '\n')
	part := b
	if i >= 0 {
		part = b[:i]
	}
	if j := bytes.IndexByte(part, '\r'); j >= 0 {
		return j
	}
	return i
}
