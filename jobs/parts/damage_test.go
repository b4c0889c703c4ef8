package parts

import (
	"context"
	"crypto/sha256"
	"errors"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"
)

// undone joins and expects work to be left.
func undone(t *testing.T, dir string) *UndoneError {
	t.Helper()
	out := t.TempDir()
	_, err := joined(t, dir, filepath.Join(out, "a.png"))
	var e *UndoneError
	if !errors.As(err, &e) {
		t.Fatalf("joined: %v", err)
	}
	if got := files(t, out); len(got) > 0 {
		t.Errorf("a join that cannot be left %v", got)
	}
	return e
}

// TestWorkLeftUndone names what is missing and what is damaged, and doing just
// that finishes the print.
func TestWorkLeftUndone(t *testing.T) {
	dir, f := t.TempDir(), testFrame(t, whole)
	if e := undone(t, dir); e.Parts != 0 || !strings.Contains(e.Hint(), "--parts "+dir) {
		t.Errorf("an empty folder: %v; %s", e, e.Hint())
	}
	const n = 7
	mustRender(t, f, task(dir, 4, n))
	if e := undone(t, dir); !reflect.DeepEqual(e.Missing, []int{1, 2, 3, 5, 6, 7}) || e.Damaged != nil ||
		!strings.Contains(e.Error(), "parts 1-3,5-7 of 7 missing") {
		t.Errorf("one part: %v", e)
	}
	fill(t, f, dir, n)
	whole := files(t, dir)
	for _, name := range []string{"part-0002-of-0007", "part-0006-of-0007"} {
		if err := os.Remove(filepath.Join(dir, name)); err != nil {
			t.Fatal(err)
		}
	}
	name := "part-0003-of-0007"
	write(t, dir, name, whole[name][:len(whole[name])-1])
	e := undone(t, dir)
	if !reflect.DeepEqual(e.Missing, []int{2, 6}) || !reflect.DeepEqual(e.Damaged, []int{3}) || e.Shared {
		t.Errorf("two missing, one damaged: %+v", e)
	}
	if !strings.Contains(e.Hint(), "sbatch --array=2-3,6;") || !strings.Contains(e.Hint(), "--part 2/7 --parts "+dir) {
		t.Errorf("hint %s", e.Hint())
	}
	for _, i := range e.Todo() {
		if d := mustRender(t, f, task(dir, i, n)); !d.Rendered {
			t.Errorf("part %d is taken for whole", i)
		}
	}
	if got := files(t, dir); !reflect.DeepEqual(got, whole) {
		t.Error("parts rendered again are others")
	}
	must(joined(t, dir, filepath.Join(t.TempDir(), "a.png")))(t)
}

// TestEveryDamageIsNoticed flips a bit of every byte of a part (of every seventh in short form), cuts it
// short and makes it longer.
func TestEveryDamageIsNoticed(t *testing.T) {
	dir, f := t.TempDir(), testFrame(t, whole)
	fill(t, f, dir, 38)
	p := must(readPrint(dir))(t)
	w := Which{3, 38}
	path := filepath.Join(dir, w.name())
	good := string(must(os.ReadFile(path))(t))
	rect := Stripe(p.rect(), 3, 38)
	damaged := func(what string, at int, b string) {
		t.Helper()
		if err := checkSum(strings.NewReader(b), int64(len(b)), w.head(p.identity()).bytes()); !errors.Is(err, errDamaged) {
			t.Fatalf("%s %d of %d: checked: %v", what, at, len(good), err)
		}
		_, err := readStripe(strings.NewReader(b), w.head(p.identity()), rect, func([]byte) error { return nil })
		if !errors.Is(err, errDamaged) {
			t.Fatalf("%s %d of %d: read: %v", what, at, len(good), err)
		}
	}
	step := 1
	if testing.Short() {
		step = 7
	}
	for i := 0; i < len(good); i += step {
		b := []byte(good)
		b[i] ^= 1 << (i % 8)
		damaged("byte", i, string(b))
		if i%5 == 0 || i > len(good)-sha256.Size-50 {
			damaged("cut to", i, good[:i])
		}
	}
	damaged("longer by", 1, good+"\x00")
	damaged("twice", 1, good+good)
	other := string(must(os.ReadFile(filepath.Join(dir, "part-0004-of-0038")))(t))
	damaged("another part's", 4, other)
	if err := checkStripe(path, w.head(p.identity())); err != nil {
		t.Errorf("the good one: %v", err)
	}
	if err := checkStripe(path, w.head(identity{})); !errors.Is(err, errDamaged) {
		t.Errorf("another print's: %v", err)
	}
}

// TestSharedIsMadeAgain, by a task whose part is whole too: without it there
// is no join.
func TestSharedIsMadeAgain(t *testing.T) {
	dir, f := t.TempDir(), testFrame(t, deep)
	fill(t, f, dir, 2)
	good := files(t, dir)[sharedName]
	for i := 0; i <= len(good); i += len(good)/101 + 1 {
		b := good[:i]
		if i%2 == 0 && i < len(good) {
			b = good[:i] + string(good[i]^4) + good[i+1:]
		}
		write(t, dir, sharedName, b)
		p := must(readPrint(dir))(t)
		if err := checkShared(dir, p.identity()); !errors.Is(err, errDamaged) {
			t.Fatalf("damage at %d of %d: %v", i, len(good), err)
		}
		if _, err := loadShared(dir, p.identity()); !errors.Is(err, errDamaged) {
			t.Fatalf("damage at %d of %d is loaded: %v", i, len(good), err)
		}
	}
	for _, spoil := range []func(){
		func() { write(t, dir, sharedName, "nonsense") },
		func() { os.Remove(filepath.Join(dir, sharedName)) },
	} {
		spoil()
		if e := undone(t, dir); !e.Shared || len(e.Todo()) > 0 || !strings.Contains(e.Hint(), "--part 1/2") {
			t.Errorf("%+v", e)
		}
		if d := mustRender(t, f, task(dir, 2, 2)); d.Rendered {
			t.Error("a whole part was rendered again")
		}
		if files(t, dir)[sharedName] != good {
			t.Error("shared is another now")
		}
	}
}

// TestDamageAfterTheCheck is noticed while rows are written; no print appears.
func TestDamageAfterTheCheck(t *testing.T) {
	dir, f := t.TempDir(), testFrame(t, whole)
	fill(t, f, dir, 2)
	p := must(readPrint(dir))(t)
	j := &join{dir: dir, print: p, id: p.identity()}
	write(t, dir, "part-0002-of-0002", files(t, dir)["part-0001-of-0002"])
	_, err := j.rows(context.Background(), func([]byte) error { return nil })
	var e *UndoneError
	if !errors.As(err, &e) || !reflect.DeepEqual(e.Damaged, []int{2}) {
		t.Errorf("%v", err)
	}
	os.Remove(filepath.Join(dir, "part-0001-of-0002"))
	_, err = j.rows(context.Background(), func([]byte) error { return nil })
	if !errors.As(err, &e) || !reflect.DeepEqual(e.Missing, []int{1}) {
		t.Errorf("%v", err)
	}
	full := errors.New("full")
	fill(t, f, dir, 2)
	if _, err := j.rows(context.Background(), func([]byte) error { return full }); !errors.Is(err, full) {
		t.Errorf("the sink's own error: %v", err)
	}
}

// TestInterrupt: a task and a join stop with the context's cause and leave
// nothing unfinished.
func TestInterrupt(t *testing.T) {
	f, dir, out := testFrame(t, whole), t.TempDir(), t.TempDir()
	ctx, cancel := context.WithCancelCause(context.Background())
	cause := errors.New("enough")
	cancel(cause)
	if _, err := Render(ctx, f, task(dir, 1, 2)); !errors.Is(err, cause) && !errors.Is(err, context.Canceled) {
		t.Errorf("a task: %v", err)
	}
	for name := range files(t, dir) {
		if strings.Contains(name, "part") {
			t.Errorf("left %s", name)
		}
	}
	fill(t, f, dir, 2)
	if _, err := Join(ctx, dir, JoinOptions{Out: filepath.Join(out, "a.png")}); !errors.Is(err, cause) && !errors.Is(err, context.Canceled) {
		t.Errorf("a join: %v", err)
	}
	if got := files(t, out); len(got) > 0 {
		t.Errorf("left %v", got)
	}
}

// TestWaitForTheFirst: while another holds the lock a task says so once and
// waits; it goes on when the shared file is there, lock or no lock.
func TestWaitForTheFirst(t *testing.T) {
	f, first, dir := testFrame(t, deep), t.TempDir(), t.TempDir()
	fill(t, f, first, 1)
	write(t, dir, printName, files(t, first)[printName])
	unlock, busy := lock(filepath.Join(dir, printName))
	if busy {
		t.Fatal("nobody has the lock")
	}
	defer unlock()
	if u, busy := lock(filepath.Join(dir, printName)); !busy {
		u()
		t.Skip("the file system of the temporary folder has no locks (flock)")
	}
	k, waits, end := task(dir, 1, 1), make(chan int, 9), make(chan error)
	k.Waiting = func() { waits <- 1 }
	go func() { _, err := Render(context.Background(), f, k); end <- err }()
	<-waits
	select {
	case err := <-end:
		t.Fatalf("did not wait: %v", err)
	case <-time.After(300 * time.Millisecond):
	}
	write(t, dir, sharedName, files(t, first)[sharedName])
	if err := <-end; err != nil || len(waits) > 0 {
		t.Errorf("%v, said %d times more", err, len(waits))
	}
}
