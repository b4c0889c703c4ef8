package board

import (
	"bytes"
	"context"
	"crypto/sha256"
	"fmt"
	"image/png"
	"net/http"
	"sync"
	"time"
)

// mostThumbs bounds the cache: some 16 MB where pictures are rich.
const mostThumbs = 64

// thumbs keeps the PNG of each print's picture as it last was. Pictures are
// made one at a time: browsers ask for many at once, and the workers want the
// cores.
type thumbs struct {
	q    Queue
	mu   sync.Mutex
	kept map[int64]*thumb
	uses int64
}

type thumb struct {
	mark string
	png  []byte
	used int64
}

func newThumbs(q Queue) *thumbs { return &thumbs{q: q, kept: map[int64]*thumb{}} }

// get is the PNG of a print's picture under a mark, or a later one.
func (t *thumbs) get(ctx context.Context, id int64, mark string) (*thumb, error) {
	t.mu.Lock()
	defer t.mu.Unlock()
	t.uses++
	if k := t.kept[id]; k != nil && k.mark == mark {
		k.used = t.uses
		return k, nil
	}
	if err := ctx.Err(); err != nil {
		return nil, err // left while it waited
	}
	img, mark, err := t.q.Thumbnail(ctx, id)
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	if err := (&png.Encoder{CompressionLevel: png.BestSpeed}).Encode(&b, img); err != nil {
		return nil, fmt.Errorf("making the picture: %w", err)
	}
	k := &thumb{mark, b.Bytes(), t.uses}
	t.kept[id] = k
	if len(t.kept) > mostThumbs {
		t.drop()
	}
	return k, nil
}

// drop forgets the picture that was least lately asked for.
func (t *thumbs) drop() {
	var id, oldest int64
	for i, k := range t.kept {
		if id == 0 || k.used < oldest {
			id, oldest = i, k.used
		}
	}
	delete(t.kept, id)
}

// thumbnail is GET /prints/{id}/thumbnail.png. Its mark decides what is new, so
// a browser that has it costs one small query.
func (p *pages) thumbnail(w http.ResponseWriter, r *http.Request) {
	id, err := number(r)
	if err != nil {
		p.fail(w, r, err)
		return
	}
	mark, err := p.q.ThumbnailMark(r.Context(), id)
	if err != nil {
		p.fail(w, r, err)
		return
	}
	k, err := p.thumbs.get(r.Context(), id, mark)
	if err != nil {
		p.fail(w, r, err)
		return
	}
	w.Header().Set("Content-Type", "image/png")
	w.Header().Set("Cache-Control", "private, no-cache")
	w.Header().Set("ETag", tag(id, k.mark))
	http.ServeContent(w, r, "", time.Time{}, bytes.NewReader(k.png))
}

// tag is an ETag of a mark, whatever characters it has.
func tag(id int64, mark string) string {
	return fmt.Sprintf(`"%x"`, sha256.Sum256(fmt.Appendf(nil, "%d %s", id, mark)))
}
