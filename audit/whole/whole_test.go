package whole

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"testing"
)

func content(t *testing.T, path string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func alone(t *testing.T, dir string, n int) {
	t.Helper()
	if entries, _ := os.ReadDir(dir); len(entries) != n {
		t.Errorf("the folder holds %v", entries)
	}
}

// A file that cannot be written whole is as it was, and nothing else is left in its folder, after a panic too.
func TestWriteAllOrNothing(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "press.yaml")
	if err := os.WriteFile(path, []byte("old"), 0o600); err != nil {
		t.Fatal(err)
	}
	failed := errors.New("no more room")
	half := func(w io.Writer) error {
		_, _ = w.Write([]byte("ne"))
		return failed
	}
	if err := Write(path, half); !errors.Is(err, failed) || content(t, path) != "old" {
		t.Errorf("%v, and the file holds %q", err, content(t, path))
	}
	alone(t, dir, 1)
	func() {
		defer func() {
			if v := recover(); v != "broken" {
				t.Errorf("the panic became %v", v)
			}
		}()
		_ = Write(path, func(io.Writer) error { panic("broken") })
	}()
	alone(t, dir, 1)
	if err := Write(path, Bytes([]byte("new"))); err != nil || content(t, path) != "new" {
		t.Errorf("%v, and the file holds %q", err, content(t, path))
	}
	if info, _ := os.Stat(path); info.Mode().Perm() != 0o600 {
		t.Errorf("its permissions became %v", info.Mode())
	}
	alone(t, dir, 1)
}

func TestWriteThroughALink(t *testing.T) {
	dir := t.TempDir()
	path, link := filepath.Join(dir, "press.yaml"), filepath.Join(dir, "link.yaml")
	if err := errors.Join(os.WriteFile(path, nil, 0o644), os.Symlink(path, link)); err != nil {
		t.Skip("no links here:", err)
	}
	if err := Write(link, Bytes([]byte("new"))); err != nil || content(t, path) != "new" {
		t.Errorf("%v, and the file holds %q", err, content(t, path))
	}
	if info, _ := os.Lstat(link); info.Mode()&fs.ModeSymlink == 0 {
		t.Error("the link was replaced")
	}
}

func TestWriteByIsForItsOwner(t *testing.T) {
	path := filepath.Join(t.TempDir(), "kept")
	if err := WriteBy(path+".tmp", path, []byte("text")); err != nil || content(t, path) != "text" {
		t.Error(err)
	}
	if info, _ := os.Stat(path); info.Mode().Perm() != 0o600 {
		t.Errorf("its permissions are %v", info.Mode())
	}
	alone(t, filepath.Dir(path), 1)
}

// Errors name no path, neither that of the file nor of the temporary one.
func TestPlain(t *testing.T) {
	dir := t.TempDir()
	err := Write(filepath.Join(dir, "none", "press.yaml"), Bytes(nil))
	if err == nil || Plain(err).Error() == err.Error() || !errors.Is(Plain(err), fs.ErrNotExist) {
		t.Errorf("%v becomes %v", err, Plain(err))
	}
	err = os.Rename(filepath.Join(dir, "a"), filepath.Join(dir, "b"))
	if err == nil || Plain(err).Error() == err.Error() || !errors.Is(Plain(err), fs.ErrNotExist) {
		t.Errorf("%v becomes %v", err, Plain(err))
	}
	if other := errors.New("x"); Plain(other) != other {
		t.Error("another error changes")
	}
}
