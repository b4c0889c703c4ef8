package jobs

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"

	"github.com/riverqueue/river/rivertype"
)

// result is what a task computed.
type result struct {
	payload []byte
	look    []byte // a tile's part of the thumbnail
	pixels  int64
}

// finish ends a task whose result is kept: the payload is written first, then
// one transaction finds the lease still ours, marks the task done, completes
// River's job and does what follows. errLate where another try has taken over.
func (w *worker) finish(ctx context.Context, job *rivertype.JobRow, k ticket, r result, after func(tx, *order) error) error {
	q := w.q
	file := ""
	if q.spool != nil {
		file = k.name()
		if err := q.spool.put(file, r.payload); err != nil {
			return err
		}
	}
	sum := sha256.Sum256(r.payload)
	err := persist(ctx, func() error {
		return q.change(ctx, k.Print, func(t tx, o *order) error {
			n, err := t.exec(ctx, `UPDATE leadline_tile SET state = 'done', finished = {now}, pixels = ?, look = ?, file = ?, sum = ?
				WHERE print = ? AND idx = ? AND try = ? AND worker = ? AND state = 'running'`,
				r.pixels, r.look, file, hex.EncodeToString(sum[:]), k.Print, k.Index, k.Try, w.id)
			if err != nil {
				return err
			}
			if n == 0 {
				return isDone(ctx, t, k, w.id)
			}
			if file == "" {
				if err := store(ctx, t, k, r.payload); err != nil {
					return err
				}
			}
			if err := t.complete(ctx, job); err != nil {
				return err
			}
			return after(t, o)
		})
	})
	if file != "" && (errors.Is(err, errLate) || errors.Is(err, errNotRunning)) {
		q.spool.drop(file)
	}
	return err
}

// isDone tells a commit that went through, though its answer was lost, from a
// try that came too late.
func isDone(ctx context.Context, c conn, k ticket, by string) error {
	var n int
	err := one(ctx, c, `SELECT count(*) FROM leadline_tile WHERE print = ? AND idx = ? AND try = ? AND worker = ? AND state = 'done'`,
		[]any{k.Print, k.Index, k.Try, by}, &n)
	if err == nil && n == 0 {
		return errLate
	}
	return err
}

// store keeps a payload in the database.
func store(ctx context.Context, t tx, k ticket, data []byte) error {
	_, err := t.exec(ctx, `INSERT INTO leadline_payload (print, idx, data) VALUES (?, ?, ?)
		ON CONFLICT (print, idx) DO UPDATE SET data = excluded.data`, k.Print, k.Index, data)
	return err
}

// kept is a finished task's payload, as the table has it.
type kept struct {
	ticket
	file, sum string
}

// payload reads what is kept, and holds it to its checksum. Damage of any kind
// is errDamaged.
func (q *Queue) payload(ctx context.Context, p kept) (b []byte, err error) {
	switch {
	case p.file == "":
		err = one(ctx, q.e.read(), `SELECT data FROM leadline_payload WHERE print = ? AND idx = ?`, []any{p.Print, p.Index}, &b)
		if errors.Is(err, errNoRow) {
			err = errDamaged
		}
	case q.spool == nil:
		return nil, &OptionError{"this print's tiles are kept in a spool folder, which this worker was not given",
			"start every worker of the queue with the same spool folder"}
	default:
		b, err = q.spool.get(p.file)
	}
	if err != nil {
		return nil, err
	}
	if sum := sha256.Sum256(b); hex.EncodeToString(sum[:]) != p.sum {
		return nil, errDamaged
	}
	return b, nil
}

// finished lists the finished tasks of a print from first up to last.
func (q *Queue) finished(ctx context.Context, id int64, first, last int) (all []kept, err error) {
	err = each(ctx, q.e.read(), `SELECT print, idx, try, file, sum FROM leadline_tile
		WHERE print = ? AND idx BETWEEN ? AND ? AND state = 'done' ORDER BY idx`, []any{id, first, last},
		func(scan func(...any) error) error {
			var p kept
			err := scan(&p.Print, &p.Index, &p.Try, &p.file, &p.sum)
			all = append(all, p)
			return err
		})
	return all, err
}
