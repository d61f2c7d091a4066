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

	"barlitre/audit/whole"
	"barlitre/circuit/recording/logger"
)

// copier puts recordings into the folder of the audit.
type copier struct {
	dir        string
	all        []toCopy
	size, done int64
}

// toCopy are the files of one recording, and the fingerprint that they were read with.
type toCopy struct {
	paths []string
	sum   string
}

// copy copies what does not lie there or below yet, and returns the names that the audit has for all.
func (c *copier) copy(ctx context.Context, share func(float64)) (names [][]string, err error) {
	for _, r := range c.all {
		var own []string
		for _, path := range r.paths {
			name, err := c.one(ctx, r, path, share)
			if err != nil {
				return nil, err
			}
			own = append(own, name)
		}
		if err := c.same(ctx, r, own); err != nil {
			return nil, err
		}
		names = append(names, own)
	}
	return names, nil
}

func (c *copier) one(ctx context.Context, r toCopy, path string, share func(float64)) (name string, err error) {
	if rel, err := filepath.Rel(c.dir, path); err == nil && filepath.IsLocal(rel) {
		return filepath.ToSlash(rel), nil
	}
	sum := r.sum
	if len(r.paths) > 1 { // that of each is not known
		if sum, err = sumOf(ctx, path); err != nil {
			return "", fmt.Errorf("%s cannot be read: %w", filepath.Base(path), whole.Plain(err))
		}
	}
	before := c.done
	name, err = copied(ctx, path, c.dir, sum, func(done int64) {
		c.done = before + done
		share(min(1, float64(c.done)/float64(max(1, c.size))))
	})
	return name, err
}

// same finds out whether files of a recording that was split are those that were read.
func (c *copier) same(ctx context.Context, r toCopy, names []string) error {
	if len(names) < 2 {
		return nil
	}
	sum, err := logger.Sum(ctx, make([]int64, len(names)), func(k int) (io.ReadCloser, error) {
		return os.Open(filepath.Join(c.dir, filepath.FromSlash(names[k])))
	}, nil)
	if err == nil && sum != r.sum {
		err = errors.New("they were changed since they were read; open them again")
	}
	if err != nil {
		return fmt.Errorf("%s: %w", logger.NameOf(names), whole.Plain(err))
	}
	return nil
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
	_, err = io.Copy(io.MultiWriter(out, hash), whole.Watch(ctx, in, tell))
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
	_, err = io.Copy(hash, whole.Watch(ctx, f, nil))
	return hex.EncodeToString(hash.Sum(nil)), err
}
