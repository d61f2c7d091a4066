package intake

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/app/station/stationtest"
	"barlitre/circuit/recording/logger"
)

// A copy takes the name of the recording, another one where a different file has that, and
// none where the same file is there; a recording that changed is not copied.
func TestCopied(t *testing.T) {
	from, to := filepath.Join(t.TempDir(), "a.csv"), t.TempDir()
	write := func(path, text string) string {
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		sum := sha256.Sum256([]byte(text))
		return hex.EncodeToString(sum[:])
	}
	sum := write(from, "t;v\n0;1\n1;2\n")
	for _, want := range []string{"a.csv", "a.csv"} {
		if name, err := copied(context.Background(), from, to, sum, nil); name != want || err != nil {
			t.Errorf("%s, %v", name, err)
		}
	}
	write(filepath.Join(to, "a.csv"), "another")
	if name, err := copied(context.Background(), from, to, sum, nil); name != "a-2.csv" || err != nil {
		t.Errorf("beside another: %s, %v", name, err)
	}
	write(from, "t;v\n0;9\n1;2\n")
	to = t.TempDir()
	if _, err := copied(context.Background(), from, to, sum, nil); err == nil || !strings.Contains(err.Error(), "changed") {
		t.Error(err)
	}
	if _, err := os.Stat(filepath.Join(to, "a.csv")); !errors.Is(err, fs.ErrNotExist) {
		t.Error("half a copy was left")
	}
	ctx, stop := context.WithCancel(context.Background())
	stop()
	if _, err := copied(ctx, from, t.TempDir(), sum, nil); err == nil {
		t.Error("a cancelled copy")
	}
}

// Work is done elsewhere; Cancel ends it, says so, and what it comes to later is dropped. A
// later job ends the one before.
func TestCancel(t *testing.T) {
	queue := make(chan func(), 100)
	p0, b0 := post, background
	post = func(f func()) { queue <- f }
	t.Cleanup(func() { post, background = p0, b0 })
	c := stationtest.New(t, "")
	p := New(c)
	p.Leave = func() {}
	held := 0
	background = func(f func()) { held++ } // reading does not begin yet
	if err := p.Open("../../../samples/recordings/press-shift.csv"); err != nil {
		t.Fatal(err)
	}
	if held != 1 || p.job.says == "" || p.ready() == "" {
		t.Fatalf("%d jobs, %q", held, p.job.says)
	}
	background = b0
	ended := make(chan error)
	late := false
	p.start("Waiting", func(ctx context.Context, share func(float64)) func() {
		share(0.5)
		<-ctx.Done()
		ended <- ctx.Err()
		return func() { late = true }
	})
	(<-queue)()
	if p.job.share != 0.5 {
		t.Errorf("share %g", p.job.share)
	}
	p.interrupt()
	if err := <-ended; !errors.Is(err, context.Canceled) {
		t.Error(err)
	}
	(<-queue)()
	if !p.head.again.Visible() {
		t.Error("it cannot be begun again")
	}
	if late || p.job.says != "" || !strings.Contains(p.head.state.Text, "Cancelled") {
		t.Errorf("late %v, says %q, state %q", late, p.job.says, p.head.state.Text)
	}
}

// A file that leaves a question open is not read before it is answered; a wrong separator is
// put right, and the columns are then found anew.
func TestCorrections(t *testing.T) {
	t.Cleanup(Inline())
	c := stationtest.New(t, "")
	p := New(c)
	p.Leave = func() {}
	dir := t.TempDir()
	open := func(text string) {
		path := filepath.Join(dir, "x.csv")
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		if err := p.Open(path); err != nil {
			t.Fatal(err)
		}
	}
	var b strings.Builder
	b.WriteString("t [s];F [N]\n")
	for _, n := range []string{"0", "1", "2", "3", "4", "5"} {
		b.WriteString(n + ";1," + n + "00\n")
	}
	open(b.String())
	if len(p.src().recipe.Questions) == 0 || p.rec != nil || p.at != 0 {
		t.Fatalf("questions %v", p.src().recipe.Questions)
	}
	p.answer(p.src().recipe.Questions[0].Field, ",")
	if p.rec == nil || p.rec.Find("F").Values()[1] != 1.1 {
		t.Errorf("answered: %v, %s", p.src().recipe, p.job.failed)
	}
	open("t [s],v [m/s]\n0,1\n1,2\n2,3\n3,3\n4,3\n")
	p.tabs[0].fill()
	if p.rec == nil || p.rec.Find("v") == nil {
		t.Fatalf("%+v %s", p.src().recipe, p.job.failed)
	}
	separator := func(word string) { p.restructure(func(r *logger.Recipe) { r.Separator = word }) }
	if separator(";"); p.rec != nil && p.rec.Find("v") != nil {
		t.Error("read with a wrong separator")
	}
	if separator(","); p.rec == nil || p.rec.Find("v") == nil || p.rec.Find("v").Unit != "m/s" {
		t.Errorf("put right: %+v, %s", p.src().recipe, p.job.failed)
	}
}

// What the tracks come to is not worked out any further once it is cancelled.
func TestWorkingOutIsCancelled(t *testing.T) {
	t.Cleanup(Inline())
	c := stationtest.New(t, "")
	p := New(c)
	p.Leave = func() {}
	if err := p.Open("../../../samples/recordings/press-shift.csv"); err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(context.Background())
	if out := workOut(ctx, c.Doc().File(), p.taking(), p.part); out.found == nil {
		t.Fatalf("no cycles: %s", out.none)
	}
	stop()
	if out := workOut(ctx, c.Doc().File(), p.taking(), p.part); out.found != nil || out.works != nil || out.rates != nil {
		t.Errorf("%+v", out)
	}
}
