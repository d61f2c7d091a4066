package document

import (
	"os"
	"path/filepath"
	"runtime"
	"syscall"
	"testing"
)

// Where a folder takes no files, the error says so and the changes are kept in the
// settings. Run by the administrator, whom no folder refuses, the thread takes the
// rights of nobody for the while.
func TestSaveReadOnlyFolder(t *testing.T) {
	b := newBench(t, quick, Options{})
	path := b.openPress(t)
	old := readFile(t, path)
	check(t, b.Set("As found/RV1.crack", "231 bar"))
	for _, dir := range []string{filepath.Dir(b.dir), filepath.Dir(b.config), b.dir} {
		check(t, os.Chmod(dir, 0o755))
	}
	check(t, os.Chmod(b.config, 0o777))
	check(t, os.Chmod(b.dir, 0o555))
	defer os.Chmod(b.dir, 0o755)
	check(t, os.RemoveAll(b.recoveryFolder()))
	check(t, os.Remove(b.recentPath()))

	fail := asNobody(t, b.Save)
	refused(t, b, fail, path, "permission denied", b.recoveryFolder())
	if readFile(t, path) != old || len(exists(t, b.dir)) != 1 {
		t.Errorf("the folder has %v", exists(t, b.dir))
	}

	check(t, os.Chmod(b.config, 0o555)) // now there is no place at all for a copy
	check(t, b.session.drop())
	b.session = nil
	check(t, os.RemoveAll(b.recoveryFolder()))
	fail = asNobody(t, b.Save)
	if fail == nil || !b.Dirty() || b.session != nil {
		t.Errorf("saved: %v", fail)
	}
	check(t, os.Chmod(b.dir, 0o755))
	check(t, b.Save())
}

func asNobody(t *testing.T, do func() error) error {
	t.Helper()
	if os.Geteuid() != 0 {
		return do()
	}
	result := make(chan error)
	go func() {
		runtime.LockOSThread() // never unlocked: the thread ends with the goroutine
		if err := syscall.Setfsuid(65534); err != nil {
			t.Error(err)
		}
		result <- do()
	}()
	return <-result
}
