package document

import (
	"errors"
	"os"
	"syscall"
)

const sharingViolation = syscall.Errno(32) // ERROR_SHARING_VIOLATION, from memory of the system's headers

// lockFile opens a file for this program alone, until it is closed; errBusy when
// another has it.
func lockFile(path string, flag int) (*os.File, error) {
	name, err := syscall.UTF16PtrFromString(path)
	if err != nil {
		return nil, err
	}
	mode := uint32(syscall.OPEN_EXISTING)
	if flag&os.O_EXCL != 0 {
		mode = syscall.CREATE_NEW
	}
	h, err := syscall.CreateFile(name, syscall.GENERIC_READ|syscall.GENERIC_WRITE, 0, nil, mode, syscall.FILE_ATTRIBUTE_NORMAL, 0)
	if errors.Is(err, sharingViolation) {
		return nil, errBusy
	}
	if err != nil {
		return nil, &os.PathError{Op: "open", Path: path, Err: err}
	}
	return os.NewFile(uintptr(h), path), nil
}
