package station

import (
	"fmt"
	"io"

	"barlitre/audit/whole"
)

// WriteWhole writes a file so that it is there whole, or as it was.
func WriteWhole(path string, write func(io.Writer) error) error {
	return whole.Write(path, func(w io.Writer) error { return Guarded(func() error { return write(w) }) })
}

// Guarded turns an error of the program itself into one that is said.
func Guarded(do func() error) (err error) {
	defer func() {
		if v := recover(); v != nil {
			err = fmt.Errorf("the program met an error of its own (%v); please report it with this file", v)
		}
	}()
	return do()
}
