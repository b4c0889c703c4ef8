package printfile

import (
	"encoding/binary"
	"fmt"
	"runtime"
	"slices"
	"sync"
)

// Writer writes one PNG, row by row. It is for one goroutine; the work inside is
// spread over several. It holds a few strips of about 1 MiB (or of one row, if
// that is longer) a worker. Every Writer must end in Commit, CommitAs or Abort.
type Writer struct {
	part     *part
	info     Info
	rowBytes int
	perStrip int // rows a full strip has
	maxIDAT  int // bytes in one IDAT chunk

	rows   int           // rows accepted so far
	fill   *strip        // the strip being filled, nil between strips
	prev   []byte        // the last row of the strip before it
	before <-chan []byte // will have the filtered end of the strip before it

	free    chan *strip // strips not in use
	work    chan *strip // strips for the workers, in order
	order   chan *strip // the same strips for the collector
	running *sync.WaitGroup
	adler   uint32 // of all filtered bytes so far; the collector's

	mu     sync.Mutex
	failed error // the first failure inside

	ended  bool  // workers and collector have gone, the part too unless committed
	report error // what every later call returns
}

// Create begins the PNG path. workers is how many goroutines filter and
// compress; below 1 means one for each processor. The bytes written do not
// depend on it. Errors are *SizeError, *InfoError or *WriteError.
func Create(path string, info Info, workers int) (*Writer, error) {
	return create(path, info, workers, stripBytes)
}

// create is Create with strips of about strip bytes.
func create(path string, info Info, workers, strip int) (*Writer, error) {
	if err := info.check(); err != nil {
		return nil, err
	}
	head, err := info.head()
	if err != nil {
		return nil, err
	}
	p, err := createPart(path)
	if err != nil {
		return nil, err
	}
	if _, err := p.Write(head); err != nil {
		p.abort()
		return nil, err
	}
	if workers < 1 {
		workers = runtime.GOMAXPROCS(0)
	}
	w := &Writer{part: p, info: info, rowBytes: info.Width * bpp, maxIDAT: maxChunk, adler: 1}
	w.perStrip = rowsPerStrip(w.rowBytes, strip)
	w.prev = make([]byte, w.rowBytes) // zeros above the first row (PNG §9.2)
	w.start(min(workers, (info.Height+w.perStrip-1)/w.perStrip))
	return w, nil
}

// start sets the workers and the collector going.
func (w *Writer) start(workers int) {
	strips := workers + 2 // one filling, one being written
	w.free, w.work, w.order = make(chan *strip, strips), make(chan *strip, strips), make(chan *strip, strips)
	for range strips {
		w.free <- &strip{}
	}
	none := make(chan []byte, 1)
	none <- nil // no strip before the first
	w.before = none
	w.running = new(sync.WaitGroup)
	for range workers {
		w.running.Go(func() {
			c := newChooser(w.rowBytes)
			for s := range w.work {
				s.compress(c, w.rowBytes)
			}
		})
	}
	w.running.Go(w.collect)
}

// WriteRows adds rows below those already written: whole rows, each pixel red,
// green, blue as big-endian 16-bit codes. The slice is not kept. After a failure
// nothing is left on disk, and every later call returns the same error.
func (w *Writer) WriteRows(rows []byte) error {
	if w.ended {
		return w.report
	}
	if err := w.failure(); err != nil {
		return w.end(err)
	}
	if n := len(rows) / w.rowBytes; n*w.rowBytes != len(rows) {
		return w.end(fmt.Errorf("write %s: %w: %d bytes are no multiple of the row's %d", w.part.path, ErrRows, len(rows), w.rowBytes))
	} else if n > w.info.Height-w.rows {
		return w.end(fmt.Errorf("write %s: %w: more than %d", w.part.path, ErrRows, w.info.Height))
	}
	for len(rows) > 0 {
		s := w.filling()
		n := min(len(rows), (w.perStrip-s.rows)*w.rowBytes)
		s.raw = append(s.raw, rows[:n]...)
		s.rows += n / w.rowBytes
		w.rows += n / w.rowBytes
		rows = rows[n:]
		if s.rows == w.perStrip || w.rows == w.info.Height {
			w.dispatch()
			if err := w.failure(); err != nil {
				return w.end(err)
			}
		}
	}
	return nil
}

// filling returns the strip that takes the next row.
func (w *Writer) filling() *strip {
	if w.fill == nil {
		s := <-w.free
		if s.raw == nil {
			s.raw = make([]byte, 0, (1+min(w.perStrip, w.info.Height))*w.rowBytes)
		}
		s.raw, s.rows, s.err = append(s.raw[:0], w.prev...), 0, nil
		w.fill = s
	}
	return w.fill
}

// dispatch hands the filled strip to the workers and to the collector.
func (w *Writer) dispatch() {
	s := w.fill
	w.fill = nil
	s.first, s.last = w.rows == s.rows, w.rows == w.info.Height
	copy(w.prev, s.raw[s.rows*w.rowBytes:])
	s.before, s.after, s.done = w.before, make(chan []byte, 1), make(chan struct{})
	w.before = s.after
	w.work <- s
	w.order <- s
}

// collect writes the compressed strips in order. After a failure it only returns
// the strips, so that nobody waits for it.
func (w *Writer) collect() {
	for s := range w.order {
		<-s.done
		if w.failure() == nil {
			if err := w.write(s); err != nil {
				w.fail(err)
			}
		}
		w.free <- s
	}
}

func (w *Writer) write(s *strip) error {
	if s.err != nil {
		return fmt.Errorf("compress %s: %w", w.part.path, s.err)
	}
	w.adler = adlerCombine(w.adler, s.adler, s.filtered)
	out := s.out
	if s.last {
		out = binary.BigEndian.AppendUint32(slices.Clip(out), w.adler)
	}
	return writeIDAT(w.part, out, w.maxIDAT)
}

// Commit completes the file, puts it in place under the name given to Create and
// returns its size in bytes. A file of that name is replaced. When it fails,
// the part is gone and the name holds what it held before; only if syncing the
// folder fails, last of all, does the whole new file stand.
func (w *Writer) Commit() (int64, error) { return w.CommitAs(w.part.path) }

// CommitAs is Commit under another name on the same disk.
func (w *Writer) CommitAs(path string) (int64, error) {
	if w.ended {
		return 0, w.report
	}
	if w.rows != w.info.Height && w.failure() == nil {
		return 0, w.end(fmt.Errorf("write %s: %w: %d of %d were given", w.part.path, ErrRows, w.rows, w.info.Height))
	}
	w.stop()
	if err := w.failure(); err != nil {
		return 0, w.end(err)
	}
	if _, err := w.part.Write(appendChunk(nil, "IEND", nil)); err != nil {
		return 0, w.end(err)
	}
	w.ended, w.report = true, ErrClosed
	if err := w.part.commit(path); err != nil {
		w.report = err
		return 0, err
	}
	return w.part.size, nil
}

// Abort removes what was written. After Commit or a failure it does nothing, so
// it can be deferred.
func (w *Writer) Abort() {
	if !w.ended {
		w.end(ErrClosed)
	}
}

// end stops the work, removes the part, and makes err what later calls return.
func (w *Writer) end(err error) error {
	w.fail(err) // the collector need not write any more
	w.stop()
	w.part.abort()
	w.ended, w.report = true, err
	return err
}

// stop waits until workers and collector have done what they were given.
func (w *Writer) stop() {
	if w.running != nil {
		close(w.work)
		close(w.order)
		w.running.Wait()
		w.running = nil
	}
}

// fail notes a failure, if it is the first.
func (w *Writer) fail(err error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	if w.failed == nil {
		w.failed = err
	}
}

func (w *Writer) failure() error {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.failed
}
