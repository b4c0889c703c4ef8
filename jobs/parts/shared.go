package parts

import (
	"bytes"
	"context"
	"crypto/sha256"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/printfile"
)

// sharedMagic opens the shared file: magic, identity, what render.Plan.Shared
// stores, SHA-256 of all before.
const sharedMagic = "leadline parts shared 1\n"

// loadShared reads what render.Plan.Shared stored. Anything but the whole
// shared file of this print is errDamaged or fs.ErrNotExist.
func loadShared(dir string, id identity) ([]byte, error) {
	b, err := os.ReadFile(filepath.Join(dir, sharedName))
	if err != nil {
		return nil, err
	}
	end := len(b) - sha256.Size
	start := append([]byte(sharedMagic), id[:]...)
	if end < len(start) || !bytes.HasPrefix(b, start) || sha256.Sum256(b[:end]) != [sha256.Size]byte(b[end:]) {
		return nil, errDamaged
	}
	return b[len(start):end], nil
}

// checkShared is loadShared for those who only want to know, in little memory.
func checkShared(dir string, id identity) error {
	return checkFile(filepath.Join(dir, sharedName), append([]byte(sharedMagic), id[:]...))
}

// storeShared puts a plan's shared part in place.
func storeShared(dir string, id identity, p *render.Plan) error {
	data, err := p.Shared()
	if err != nil {
		return err
	}
	b := append([]byte(sharedMagic), id[:]...)
	b = append(b, data...)
	sum := sha256.Sum256(b)
	return printfile.WriteFile(filepath.Join(dir, sharedName), append(b, sum[:]...))
}

// restore makes a plan of the shared file. Damage is errDamaged.
func restore(ctx context.Context, dir string, id identity, o render.Options) (*render.Plan, error) {
	b, err := loadShared(dir, id)
	if err != nil {
		return nil, err
	}
	p, err := render.NewPlanFromShared(ctx, b, o)
	if errors.Is(err, render.ErrShared) {
		return nil, errDamaged
	}
	return p, err
}

// absent reports whether a file has to be made, or made again.
func absent(err error) bool { return errors.Is(err, fs.ErrNotExist) || errors.Is(err, errDamaged) }

// longestWait is the longest pause between two looks at what another makes.
const longestWait = 2 * time.Second

// sharedPlan is the print's plan: from the shared file where there is one,
// else computed, by one task while the others wait. The lock that says who
// ends with the task that holds it. Where a file system has no locks every
// task computes its own; the results are the same, and so the last one wins.
func sharedPlan(ctx context.Context, t Task, f *frame.Frame, id identity) (*render.Plan, error) {
	said := false
	for pause := 50 * time.Millisecond; ; pause = min(2*pause, longestWait) {
		p, err := restore(ctx, t.Dir, id, t.Options)
		if !absent(err) {
			return p, err
		}
		unlock, busy := lock(filepath.Join(t.Dir, printName))
		if !busy {
			defer unlock()
			return computed(ctx, t, f, id)
		}
		if !said && t.Waiting != nil {
			t.Waiting()
		}
		said = true
		select {
		case <-time.After(pause):
		case <-ctx.Done():
			return nil, context.Cause(ctx)
		}
	}
}

// computed makes the plan and the shared file, unless the task that held the
// lock before has.
func computed(ctx context.Context, t Task, f *frame.Frame, id identity) (*render.Plan, error) {
	p, err := restore(ctx, t.Dir, id, t.Options)
	if !absent(err) {
		return p, err
	}
	if p, err = render.NewPlan(ctx, f, t.Options); err != nil {
		return nil, err
	}
	return p, storeShared(t.Dir, id, p)
}
