package jobs

import (
	"context"
	"math"
	"time"
)

// Progress is how fast a print goes, by the tiles finished in the last minute.
type Progress struct {
	Pixels  int64   `json:"pixels"`            // of the print
	Pixel   int64   `json:"pixels_done"`       // in finished tiles
	Rate    float64 `json:"pixels_per_second"` // 0: none finished lately
	Workers int     `json:"workers"`           // alive that could work on it
	// Left is the time to go at that rate, between LeftLow and LeftHigh with two
	// standard errors of a tile's time. All are 0 where nothing is known.
	Left     float64 `json:"seconds_left"`
	LeftLow  float64 `json:"seconds_left_low"`
	LeftHigh float64 `json:"seconds_left_high"`
}

// measure fills in what moves: tiles, rate, time left.
func (q *Queue) measure(ctx context.Context, all []Print) error {
	alive, err := q.alive(ctx)
	if err != nil {
		return err
	}
	for i := range all {
		p := &all[i]
		p.Pixels = int64(p.Width) * int64(p.Height)
		if !p.State.over() {
			p.Progress.Workers = alive[queueName(p.Release, p.Numerics)]
		}
		if err := q.measureOne(ctx, p); err != nil {
			return err
		}
	}
	return nil
}

// window is how far back the rate looks.
const window = time.Minute

func (q *Queue) measureOne(ctx context.Context, p *Print) error {
	if p.State == Done { // known without counting; a queue may hold many
		p.Done, p.Pixel = p.Tiles, p.Pixels
		return nil
	}
	err := one(ctx, q.e.read(), `SELECT count(*), cast(coalesce(sum(pixels), 0) as bigint) FROM leadline_tile
		WHERE print = ? AND state = 'done' AND idx >= 0`, []any{p.ID}, &p.Done, &p.Pixel)
	if err != nil || p.State != Rendering || p.Paused || p.Progress.Workers == 0 { // nobody works: no rate
		return err
	}
	var n, pixels, elapsed int64
	var sum, squares float64
	err = one(ctx, q.e.read(), `SELECT count(t.idx), cast(coalesce(sum(t.pixels), 0) as bigint), {now} - p.began,
		cast(coalesce(sum(1.0*(t.finished - t.started)), 0) as double precision),
		cast(coalesce(sum(1.0*(t.finished - t.started)*(t.finished - t.started)), 0) as double precision)
		FROM leadline_print p LEFT JOIN leadline_tile t ON t.print = p.id AND t.state = 'done' AND t.idx >= 0
		AND t.finished > {now} - 60000 AND t.finished >= p.began WHERE p.id = ? GROUP BY p.began`, []any{p.ID},
		&n, &pixels, &elapsed, &sum, &squares)
	if err == nil {
		p.estimate(n, pixels, time.Duration(elapsed)*time.Millisecond, sum, squares)
	}
	return err
}

// estimate computes rate and time left from n tiles of the given pixels that
// were finished within elapsed, or the window; sum and squares are of the
// tiles' times.
func (p *Progress) estimate(n, pixels int64, elapsed time.Duration, sum, squares float64) {
	p.Rate = rate(pixels, elapsed)
	if p.Rate == 0 {
		return
	}
	p.Left = float64(p.Pixels-p.Pixel) / p.Rate
	if n < 2 || sum <= 0 {
		return
	}
	mean := sum / float64(n)
	deviation := math.Sqrt(max(0, squares/float64(n)-float64(mean*mean)))
	e := 2 * deviation / (mean * math.Sqrt(float64(n)))
	p.LeftLow, p.LeftHigh = p.Left*max(0, 1-e), p.Left*(1+e)
}

// rate is that of pixels made within elapsed, or within the window.
func rate(pixels int64, elapsed time.Duration) float64 {
	return float64(pixels) / min(max(elapsed, time.Millisecond), window).Seconds()
}

// alive counts the workers seen lately by River queue.
func (q *Queue) alive(ctx context.Context) (map[string]int, error) {
	n := map[string]int{}
	err := each(ctx, q.e.read(), `SELECT release, numerics FROM leadline_worker WHERE seen > {now} - ?`,
		[]any{q.time.silence.Milliseconds()}, func(scan func(...any) error) error {
			var release string
			var numerics int
			err := scan(&release, &numerics)
			n[queueName(release, numerics)]++
			return err
		})
	return n, err
}
