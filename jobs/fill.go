package jobs

import (
	"context"
	"errors"

	"github.com/riverqueue/river"
)

// minWindow is the least number of a print's tiles that stand in River at once.
const minWindow = 32

// fill queues what a print's state asks for: the plan, as many tiles as the
// window takes, or the assembly. It is called by whatever may have made room,
// and does nothing where nothing is to do.
func (q *Queue) fill(ctx context.Context, t tx, id int64) error {
	o, err := load(ctx, t, id, "{lock}")
	if err != nil || o.paused {
		return err
	}
	switch o.state {
	case Queued, Planning:
		return q.ensure(ctx, t, o, planIndex)
	case Rendering:
		return q.fillTiles(ctx, t, o)
	case Assembling:
		return q.ensure(ctx, t, o, assemblyIndex)
	}
	return nil
}

// fillTiles queues tiles up to the window, those that were put back first, and
// begins the assembly when none is left.
func (q *Queue) fillTiles(ctx context.Context, t tx, o *order) error {
	var idle, busy int
	err := each(ctx, t, `SELECT state, count(*) FROM leadline_tile WHERE print = ? AND idx >= 0
		AND state IN ('idle', 'queued', 'running') GROUP BY state`, []any{o.id}, func(scan func(...any) error) error {
		var state string
		var n int
		err := scan(&state, &n)
		if state == "idle" {
			idle = n
		} else {
			busy += n
		}
		return err
	})
	if err != nil {
		return err
	}
	if idle+busy == 0 && o.next >= o.tiles {
		return q.enter(ctx, t, o, Assembling)
	}
	var room int
	if err := one(ctx, t, `SELECT cast(coalesce(sum(slots), 0) as integer) FROM leadline_worker WHERE release = ? AND numerics = ?`,
		[]any{o.release, o.number}, &room); err != nil {
		return err
	}
	room = max(minWindow, 4*room)
	if busy > room/2 {
		return nil // many at a time cost less
	}
	return q.queueTiles(ctx, t, o, room-busy)
}

// enter moves a print to another state and queues what it asks for.
func (q *Queue) enter(ctx context.Context, t tx, o *order, s State) error {
	if _, err := t.exec(ctx, `UPDATE leadline_print SET state = ?, reason = '', hint = '', ended = 0 WHERE id = ?`, string(s), o.id); err != nil {
		return err
	}
	return q.fill(ctx, t, o.id)
}

// queueTiles queues up to n tiles.
func (q *Queue) queueTiles(ctx context.Context, t tx, o *order, n int) error {
	tickets, err := tickets(ctx, t, `SELECT print, idx, try FROM leadline_tile WHERE print = ? AND state = 'idle' AND idx >= 0
		ORDER BY idx LIMIT ?`, o.id, n)
	if err != nil {
		return err
	}
	next := min(o.tiles, o.next+n-len(tickets))
	for i := o.next; i < next; i++ {
		if _, err := t.exec(ctx, `INSERT INTO leadline_tile (print, idx, state) VALUES (?, ?, 'idle')`, o.id, i); err != nil {
			return err
		}
		tickets = append(tickets, ticket{o.id, i, 0})
	}
	if next > o.next {
		if _, err := t.exec(ctx, `UPDATE leadline_print SET next = ? WHERE id = ?`, next, o.id); err != nil {
			return err
		}
	}
	return q.put(ctx, t, o, o.priority, tickets...)
}

// ensure queues the plan or the assembly unless it is under way.
func (q *Queue) ensure(ctx context.Context, t tx, o *order, index int) error {
	k := ticket{Print: o.id, Index: index}
	var state string
	err := one(ctx, t, `SELECT state, try FROM leadline_tile WHERE print = ? AND idx = ?`, []any{o.id, index}, &state, &k.Try)
	switch {
	case errors.Is(err, errNoRow):
		_, err = t.exec(ctx, `INSERT INTO leadline_tile (print, idx, state) VALUES (?, ?, 'idle')`, o.id, index)
	case state == "queued" || state == "running":
		return nil
	case state == "done":
		k.Try++
	}
	if err != nil {
		return err
	}
	priority := o.priority
	if index == assemblyIndex {
		priority = 1 // it frees what the tiles take up
	}
	return q.put(ctx, t, o, priority, k)
}

// put hands tasks to River and notes their jobs.
func (q *Queue) put(ctx context.Context, t tx, o *order, priority int, tickets ...ticket) error {
	queue := queueName(o.release, o.number)
	params := make([]river.InsertManyParams, len(tickets))
	for i, k := range tickets {
		params[i] = k.job(queue, priority)
	}
	ids, err := t.insert(ctx, params)
	if err != nil {
		return err
	}
	for i, k := range tickets {
		if _, err := t.exec(ctx, `UPDATE leadline_tile SET state = 'queued', try = ?, job = ?, worker = '' WHERE print = ? AND idx = ?`,
			k.Try, ids[i], k.Print, k.Index); err != nil {
			return err
		}
	}
	return nil
}

// tickets reads a query's tasks.
func tickets(ctx context.Context, c conn, query string, args ...any) (all []ticket, err error) {
	err = each(ctx, c, query, args, func(scan func(...any) error) error {
		var k ticket
		err := scan(&k.Print, &k.Index, &k.Try)
		all = append(all, k)
		return err
	})
	return all, err
}
