package intake

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"barlitre/audit"
	"barlitre/audit/whole"
	"barlitre/circuit/logged"
	"barlitre/machines/units"
)

// make makes the duty: the audit must have a folder, and the recording a copy in it.
func (p *Page) make() {
	if why := p.ready(); why != "" {
		p.ctx.Fail(errors.New(strings.TrimPrefix(why, "⚠ ")))
		return
	}
	if p.again == "" && p.dutyNamed(strings.TrimSpace(p.head.name.Text)) >= 0 {
		p.ctx.Fail(fmt.Errorf("there is a duty %q already; give this one another name", p.head.name.Text))
		return
	}
	hours, err := hoursText(p.head.hours.Text)
	if err != nil {
		p.ctx.Fail(fmt.Errorf("hours a year: %w", err))
		return
	}
	if p.ctx.Doc().Path() == "" {
		p.ctx.SaveFirst("The recording is kept beside the audit, so the audit needs a place. Save it first.", func() { p.beside(hours) })
		return
	}
	p.beside(hours)
}

// hoursText brings hours a year into the form that files have; a bare number is hours.
func hoursText(text string) (string, error) {
	if strings.TrimSpace(text) == "" {
		return "", nil
	}
	hour, _ := units.ParseUnit("h", units.Time)
	si, u, err := units.ParseLoose(text, units.Time, hour)
	if err == nil && (si < 0 || si > 366*units.Day) {
		err = errors.New("a year has 0 h to 8784 h")
	}
	if err != nil {
		return "", err
	}
	return units.FileText(si, u), nil
}

// beside makes the duty once the recording lies beside the audit or below.
func (p *Page) beside(hours string) {
	dir := filepath.Dir(p.ctx.Doc().Path())
	if rel, err := filepath.Rel(dir, p.path); err == nil && filepath.IsLocal(rel) {
		p.finish(filepath.ToSlash(rel), hours)
		return
	}
	from, sum, size := p.path, p.kept.Recording().SHA256, p.file.Size
	p.start("Copying the recording beside the audit", func(ctx context.Context, share func(float64)) func() {
		name, err := copied(ctx, from, dir, sum, func(done int64) { share(float64(done) / float64(max(1, size))) })
		return func() {
			if err != nil {
				p.job.failed = err.Error()
				p.refresh()
				return
			}
			p.finish(name, hours)
		}
	})
}

// copied puts a recording into a folder, under its name or, where another file has that, the
// next free one. sum is the fingerprint that it was read with.
func copied(ctx context.Context, from, dir, sum string, tell func(done int64)) (name string, err error) {
	ext := filepath.Ext(from)
	base := strings.TrimSuffix(filepath.Base(from), ext)
	for n := 1; ; n++ {
		name = base + ext
		if n > 1 {
			name = fmt.Sprintf("%s-%d%s", base, n, ext)
		}
		there, err := sumOf(ctx, filepath.Join(dir, name))
		if errors.Is(err, fs.ErrNotExist) {
			break
		}
		if err != nil {
			return "", fmt.Errorf("%s cannot be read: %w", name, whole.Plain(err))
		}
		if there == sum {
			return name, nil
		}
	}
	in, err := os.Open(from)
	if err != nil {
		return "", fmt.Errorf("%s cannot be read: %w", filepath.Base(from), whole.Plain(err))
	}
	defer in.Close()
	target := filepath.Join(dir, name)
	out, err := os.OpenFile(target, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	if err != nil {
		return "", fmt.Errorf("%s cannot be put beside the audit: %w", name, whole.Plain(err))
	}
	hash := sha256.New()
	_, err = io.Copy(io.MultiWriter(out, hash), &watched{ctx: ctx, in: in, tell: tell})
	err = errors.Join(err, out.Close())
	if err == nil && hex.EncodeToString(hash.Sum(nil)) != sum {
		err = errors.New("it was changed since it was read; open it again")
	}
	if err != nil {
		return "", errors.Join(fmt.Errorf("%s cannot be put beside the audit: %w", name, whole.Plain(err)), os.Remove(target))
	}
	return name, nil
}

func sumOf(ctx context.Context, path string) (string, error) {
	f, err := os.Open(path)
	if err != nil {
		return "", err
	}
	defer f.Close()
	hash := sha256.New()
	_, err = io.Copy(hash, &watched{ctx: ctx, in: f})
	return hex.EncodeToString(hash.Sum(nil)), err
}

// watched ends reading when it is told to, and tells how far it is.
type watched struct {
	ctx  context.Context
	in   io.Reader
	done int64
	told int64
	tell func(done int64)
}

const tellBytes = 4 << 20

func (w *watched) Read(b []byte) (int, error) {
	if err := w.ctx.Err(); err != nil {
		return 0, err
	}
	n, err := w.in.Read(b)
	if w.done += int64(n); w.tell != nil && w.done-w.told > tellBytes {
		w.told = w.done
		w.tell(w.done)
	}
	return n, err
}

// rowsEnough is from how many rows on a recording's energies are counted at its rows alone.
const rowsEnough = 1000

// cyclic reports whether a part is one cycle, of which the duty repeats.
func cyclic(part logged.Part) bool { return !part.Whole() && part.Is != stretchIs }

// finish edits the audit, as one step of undo, and leaves.
func (p *Page) finish(file, hours string) {
	t := p.taking()
	t.Duty, t.File, t.Part, t.Keys = strings.TrimSpace(p.head.name.Text), file, p.part, map[string]string{}
	step := "Take in " + p.file.Name
	if p.again != "" {
		t.Duty, step = p.again, "Change how "+p.again+" is taken in"
	} else {
		if hours != "" {
			t.Keys["hours"] = hours
		}
		if cyclic(p.part) {
			t.Keys["repeats"] = "yes"
		} else if len(p.out.whole.Time) >= rowsEnough && p.part.Whole() {
			t.Keys["instants"] = "no" // sums over the rows, as anyone can repeat them
		}
	}
	doc := p.ctx.Doc()
	p.start("Making the duty", func(ctx context.Context, _ func(float64)) func() {
		p.work.Lock()
		defer p.work.Unlock()
		err := doc.Edit(step, func(f *audit.File) error {
			if err := f.TakeIn(t); err != nil {
				return err
			}
			return ctx.Err() // cancelled meanwhile: nothing is changed
		})
		return func() { p.made(t, file, err) }
	})
}

// made leaves once the duty is in the audit, and says so.
func (p *Page) made(t audit.Taking, file string, err error) {
	if err != nil {
		p.refresh()
		p.ctx.Fail(fmt.Errorf("%w. Nothing was changed", err))
		return
	}
	i := p.dutyNamed(t.Duty)
	p.close()
	if i >= 0 {
		p.ctx.SetDuty(i)
	}
	said := fmt.Sprintf("Duty %s is made of %s: %d tracks.", t.Duty, file, len(t.Tracks))
	if n := len(t.Axes); n > 0 {
		said += fmt.Sprintf(" New axes: %d.", n)
	}
	p.ctx.Say(said + " Undo takes it back.")
}
