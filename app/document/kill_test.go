package document

import (
	"bufio"
	"fmt"
	"math/rand"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"time"
)

const childEnv = "BARLITRE_TEST_AUTOSAVE_DIR"

// childMain edits until it is killed. It says which edit is safe, on disk or in the
// autosave, as soon as the document does.
func childMain(dir string) {
	fatal := func(err error) {
		if err != nil {
			fmt.Println("error", err)
			os.Exit(1)
		}
	}
	path := filepath.Join(dir, "press.yaml")
	fatal(os.WriteFile(path, []byte(emptyText), 0o644)) // short, so that many edits are made
	first := make(chan int, 1)
	opened := 0
	d := newDocument(Options{Config: filepath.Join(dir, "config"), AutosaveAfter: time.Millisecond, Notify: func(e Event) {
		switch e.Kind {
		case Opened:
			first <- e.Revision
		case Saved, Autosaved:
			fmt.Println("safe", e.Revision-opened) // edit 1 is the revision after opening
		case AutosaveFailed:
			fatal(e.Err)
		}
	}}, quick)
	_, err := d.Open(path)
	fatal(err)
	opened = <-first
	fmt.Println("ready")
	r := rand.New(rand.NewSource(time.Now().UnixNano()))
	for i := 1; ; i++ {
		fatal(d.Set("site.name", fmt.Sprintf("edit %d", i)))
		time.Sleep(time.Duration(r.Intn(3000)) * time.Microsecond)
		if i%10 == 0 {
			fatal(d.Save())
		}
	}
}

var editNumber = regexp.MustCompile(`name: "edit (\d+)"`)

// numberIn returns the number of the edit that made a text, and fails on a text that
// none made.
func numberIn(t *testing.T, text string) int {
	t.Helper()
	if text == emptyText {
		return 0
	}
	m := editNumber.FindStringSubmatch(text)
	if m == nil || text != strings.Replace(emptyText, `name: ""`, m[0], 1) {
		t.Fatalf("spoilt:\n%s", text)
	}
	n, err := strconv.Atoi(m[1])
	check(t, err)
	return n
}

// Killed at any moment, the program loses nothing it had said to be safe, and leaves
// no half of a file.
func TestKilled(t *testing.T) {
	kills := 50
	if testing.Short() {
		kills = 8
	}
	r := rand.New(rand.NewSource(3))
	recovered, most := 0, 0
	for i := range kills {
		safe, fromAutosave := killOnce(t, r.Intn(20), time.Duration(r.Intn(6000))*time.Microsecond)
		if t.Failed() {
			t.Fatalf("kill %d", i)
		}
		most = max(most, safe)
		if fromAutosave {
			recovered++
		}
	}
	if recovered < kills/4 || most < 15 {
		t.Errorf("of %d kills %d left an autosave, at most %d edits were safe: too few to prove anything", kills, recovered, most)
	}
	t.Logf("%d kills, %d recovered from the autosave, up to %d edits", kills, recovered, most)
}

// killOnce kills the program some time after it has said a few times what is safe.
func killOnce(t *testing.T, count int, after time.Duration) (safe int, fromAutosave bool) {
	dir := t.TempDir()
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), childEnv+"="+dir)
	out, err := cmd.StdoutPipe()
	check(t, err)
	check(t, cmd.Start())
	lines := bufio.NewScanner(out)
	for ; lines.Scan(); count-- {
		if count == 0 {
			time.AfterFunc(after, func() { cmd.Process.Kill() }) // a kill that cannot be caught
		}
		switch word, rest, _ := strings.Cut(lines.Text(), " "); word {
		case "ready":
		case "safe":
			n, err := strconv.Atoi(rest)
			if err == nil {
				safe = max(safe, n)
			}
		default:
			t.Errorf("the program said %q", lines.Text())
		}
	}
	cmd.Wait() // its error is that it was killed

	disk := readFile(t, filepath.Join(dir, "press.yaml"))
	for _, name := range exists(t, dir) {
		if strings.HasSuffix(name, autosaveExt) {
			_, text, err := decodeAutosave([]byte(readFile(t, filepath.Join(dir, name))))
			check(t, err)
			numberIn(t, string(text))
		}
	}
	b := newBench(t, quick, Options{Config: filepath.Join(dir, "config")})
	defer b.Abandon()
	list := b.Recoverable()
	got := numberIn(t, disk)
	if len(list) > 1 {
		t.Errorf("%d to recover", len(list))
	}
	for _, rec := range list {
		fromAutosave = true
		check(t, b.Recover(rec))
		got = numberIn(t, string(b.File().Bytes())) // what the user gets by saying yes
	}
	if got < safe {
		t.Errorf("edit %d was said to be safe, edit %d is there (file %d)", safe, got, numberIn(t, disk))
	}
	return safe, fromAutosave
}
