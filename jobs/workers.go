package jobs

import (
	"context"
	"time"
)

// Worker is a process that works on the queue.
type Worker struct {
	Name     string    `json:"name"`
	Host     string    `json:"host"`
	PID      int       `json:"pid"`
	Slots    int       `json:"slots"`
	Release  string    `json:"release"`
	Numerics int       `json:"numerics"`
	Started  time.Time `json:"started"`
	Seen     time.Time `json:"seen"`
	Running  int       `json:"running"`           // tasks in hand
	Holding  []string  `json:"holding,omitempty"` // which, in words
	Tiles    int64     `json:"tiles_lately"`      // finished in the last minute
	Rate     float64   `json:"pixels_per_second"` // in those
}

// Workers lists the workers that have a lease.
func (q *Queue) Workers(ctx context.Context) ([]Worker, error) {
	var all []Worker
	at := map[string]int{}
	err := each(ctx, q.e.read(), `SELECT w.id, name, host, pid, slots, release, numerics, w.started, seen, count(t.idx),
		cast(coalesce(sum(t.pixels), 0) as bigint), {now} - w.started
		FROM leadline_worker w LEFT JOIN leadline_tile t ON t.worker = w.id AND t.state = 'done' AND t.idx >= 0
		AND t.finished > {now} - ? GROUP BY w.id, name, host, pid, slots, release, numerics, w.started, seen
		ORDER BY name, w.id`, []any{window.Milliseconds()}, func(scan func(...any) error) error {
		var w Worker
		var id string
		var started, seen, pixels, age int64
		err := scan(&id, &w.Name, &w.Host, &w.PID, &w.Slots, &w.Release, &w.Numerics, &started, &seen, &w.Tiles, &pixels, &age)
		w.Started, w.Seen = moment(started), moment(seen)
		w.Rate = rate(pixels, time.Duration(age)*time.Millisecond)
		at[id] = len(all)
		all = append(all, w)
		return err
	})
	if err != nil {
		return nil, err
	}
	return all, each(ctx, q.e.read(), `SELECT worker, print, idx FROM leadline_tile WHERE state = 'running' ORDER BY print, idx`, nil,
		func(scan func(...any) error) error {
			var id string
			var k ticket
			if err := scan(&id, &k.Print, &k.Index); err != nil {
				return err
			}
			if i, known := at[id]; known {
				all[i].Holding = append(all[i].Holding, k.String())
				all[i].Running++
			}
			return nil
		})
}
