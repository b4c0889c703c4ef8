package parts

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"

	"leadline/render"
	"leadline/render/printfile"
)

// PhaseCheck is the phase in which the join reads every part once; it counts
// parts.
const PhaseCheck = "check"

// JoinOptions say how a folder of parts becomes a print.
type JoinOptions struct {
	render.Options
	Out   string // the PNG; "": the print's own name, in the current folder
	Audit int    // pixels to audit; below 0: as many as the tasks were told
	Clean bool   // remove the parts once the print is whole
}

// Join makes the PNG and sidecar of a folder of parts: the same files, but for
// the sidecar's run, as render.Print makes of the same frame and options. The
// error is an *UndoneError while parts are missing or damaged. The folder is
// left as it is, unless Clean.
func Join(ctx context.Context, dir string, o JoinOptions) (*render.Result, error) {
	print, err := readPrint(dir)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, &UndoneError{Dir: dir}
	}
	if err != nil {
		return nil, err
	}
	if print.Release != render.Release || print.Numerics != render.Numerics {
		return nil, &render.MismatchError{What: fmt.Sprintf("the parts in %s were rendered by release %s (numerics %d), this is %s (%d)",
			dir, print.Release, print.Numerics, render.Release, render.Numerics), Cure: "join them with the release that rendered them"}
	}
	rect := print.rect()
	p := render.PrintOptions{Options: o.Options, Out: o.Out, Crop: &rect, Scale: print.Pixels.Scale, Audit: o.Audit}
	if p.Out == "" {
		p.Out = print.Name
	}
	if p.Audit < 0 {
		p.Audit = print.Audit
	}
	j := &join{dir: dir, print: print, id: print.identity(), o: o}
	r, err := j.assemble(ctx, p)
	if err == nil && o.Clean {
		err = clean(dir)
	}
	return r, err
}

// join is one join under way.
type join struct {
	dir   string
	print Print
	id    identity
	o     JoinOptions
}

// assemble checks all and then makes the print.
func (j *join) assemble(ctx context.Context, p render.PrintOptions) (*render.Result, error) {
	for _, path := range []string{p.Out, render.SidecarPath(p.Out)} {
		if err := printfile.Try(path); err != nil {
			return nil, err // rather than after reading everything
		}
	}
	if err := j.check(ctx); err != nil {
		return nil, err
	}
	plan, err := restore(ctx, j.dir, j.id, j.o.Options)
	if absent(err) {
		return nil, &UndoneError{Dir: j.dir, Parts: j.print.Parts, Shared: true}
	}
	if err != nil {
		return nil, err
	}
	return render.Assemble(ctx, plan, p, j.rows)
}

// check reads every part once.
func (j *join) check(ctx context.Context) error {
	undone := &UndoneError{Dir: j.dir, Parts: j.print.Parts}
	err := checkShared(j.dir, j.id)
	if err != nil && !absent(err) {
		return err
	}
	undone.Shared = err != nil
	for i := 1; i <= j.print.Parts; i++ {
		j.tell(PhaseCheck, int64(i-1), int64(j.print.Parts))
		if ctx.Err() != nil {
			return context.Cause(ctx)
		}
		w := Which{i, j.print.Parts}
		err := checkStripe(j.path(w), w.head(j.id))
		switch {
		case err == nil:
		case errors.Is(err, fs.ErrNotExist):
			undone.Missing = append(undone.Missing, i)
		case errors.Is(err, errDamaged):
			undone.Damaged = append(undone.Damaged, i)
		default:
			return err
		}
	}
	j.tell(PhaseCheck, int64(j.print.Parts), int64(j.print.Parts))
	if undone.Shared || len(undone.Missing)+len(undone.Damaged) > 0 {
		return undone
	}
	return nil
}

// rows hands all rows to sink, part by part.
func (j *join) rows(ctx context.Context, sink func([]byte) error) (render.Counts, error) {
	var all render.Counts
	rect := j.print.rect()
	done, total := int64(0), int64(rect.Dx())*int64(rect.Dy())
	j.tell(render.PhasePixels, 0, total)
	for i := 1; i <= j.print.Parts; i++ {
		n, err := j.part(Which{i, j.print.Parts}, func(rows []byte) error {
			if ctx.Err() != nil {
				return context.Cause(ctx)
			}
			done += int64(len(rows) / render.BytesPerPixel)
			j.tell(render.PhasePixels, done, total)
			return sink(rows)
		})
		if err != nil {
			return all, err
		}
		all.Add(n)
	}
	return all, nil
}

// part reads one part. It was whole when it was checked; what has become of it
// since is noticed here.
func (j *join) part(w Which, sink func([]byte) error) (render.Counts, error) {
	f, err := os.Open(j.path(w))
	if errors.Is(err, fs.ErrNotExist) {
		return render.Counts{}, &UndoneError{Dir: j.dir, Parts: w.N, Missing: []int{w.I}}
	}
	if err != nil {
		return render.Counts{}, err
	}
	defer f.Close()
	n, err := readStripe(f, w.head(j.id), Stripe(j.print.rect(), w.I, w.N), sink)
	if errors.Is(err, errDamaged) {
		return n, &UndoneError{Dir: j.dir, Parts: w.N, Damaged: []int{w.I}}
	}
	return n, err
}

func (j *join) path(w Which) string { return filepath.Join(j.dir, w.name()) }

func (j *join) tell(phase string, done, total int64) {
	if j.o.Progress != nil {
		j.o.Progress(render.Progress{Phase: phase, Done: done, Total: total})
	}
}

// ours matches the names in a folder of parts that are of our making, those
// that killed tasks leave hidden too. print.json is not among them.
var ours = regexp.MustCompile(`^(part-\d{4}-of-\d{4}|shared|\.(part-\d{4}-of-\d{4}|shared|print\.json)\.[0-9a-f]{16}\.part)$`)

// clean removes the parts and, if nothing else is in it, the folder. print.json
// goes last: until then the folder is known for what it is.
func clean(dir string) error {
	entries, err := os.ReadDir(dir)
	if err != nil {
		return err
	}
	for _, e := range entries {
		if ours.MatchString(e.Name()) {
			if err := os.Remove(filepath.Join(dir, e.Name())); err != nil && !errors.Is(err, fs.ErrNotExist) {
				return fmt.Errorf("the print is whole, but its parts could not be removed: %w", err)
			}
		}
	}
	if err := os.Remove(filepath.Join(dir, printName)); err != nil {
		return fmt.Errorf("the print is whole, but its parts could not be removed: %w", err)
	}
	_ = os.Remove(dir) // fails where there is something else in it, which stays
	return nil
}
