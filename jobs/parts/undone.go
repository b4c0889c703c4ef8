package parts

import (
	"fmt"
	"strings"
)

// UndoneError says that a print cannot be joined yet.
type UndoneError struct {
	Dir     string
	Parts   int   // how many there are to be; 0: nothing was begun
	Missing []int // parts that are not there, in order
	Damaged []int // parts that are there and not whole, or not this print's
	Shared  bool  // what all share is missing or damaged
}

// Error says what is left to do.
func (e *UndoneError) Error() string {
	if e.Parts == 0 {
		return fmt.Sprintf("work is left undone: no part was begun in %s", e.Dir)
	}
	var what []string
	if len(e.Missing) > 0 {
		what = append(what, fmt.Sprintf("%s %s of %d missing", plural(e.Missing), Ranges(e.Missing), e.Parts))
	}
	if len(e.Damaged) > 0 {
		what = append(what, fmt.Sprintf("%s %s of %d damaged", plural(e.Damaged), Ranges(e.Damaged), e.Parts))
	}
	if e.Shared {
		what = append(what, "what all parts share missing or damaged")
	}
	return fmt.Sprintf("work is left undone in %s: %s", e.Dir, strings.Join(what, "; "))
}

// Hint says how to do just that.
func (e *UndoneError) Hint() string {
	todo := e.Todo()
	switch {
	case e.Parts == 0:
		return "check the spelling of the folder; its parts are made by leadline render FRAME --part i/n --parts " + e.Dir
	case len(todo) == 0:
		return fmt.Sprintf("render any part again: leadline render FRAME --part 1/%d --parts %s", e.Parts, e.Dir)
	}
	return fmt.Sprintf("those still being rendered count as missing; render the others with the same frame and options: leadline render FRAME --part %d/%d --parts %s\n"+
		"in a Slurm array: sbatch --array=%s; then join again", todo[0], e.Parts, e.Dir, Ranges(todo))
}

// Todo lists the parts to be rendered, in order.
func (e *UndoneError) Todo() []int {
	var todo []int
	m, d := e.Missing, e.Damaged
	for len(m) > 0 || len(d) > 0 {
		if len(d) == 0 || len(m) > 0 && m[0] < d[0] {
			todo, m = append(todo, m[0]), m[1:]
		} else {
			todo, d = append(todo, d[0]), d[1:]
		}
	}
	return todo
}

func plural(parts []int) string {
	if len(parts) == 1 {
		return "part"
	}
	return "parts"
}

// Ranges writes ascending numbers as Slurm's --array reads them: 3,7-12,40.
func Ranges(n []int) string {
	var b strings.Builder
	for i := 0; i < len(n); {
		j := i
		for j+1 < len(n) && n[j+1] == n[j]+1 {
			j++
		}
		if i > 0 {
			b.WriteByte(',')
		}
		fmt.Fprint(&b, n[i])
		if j > i {
			fmt.Fprintf(&b, "-%d", n[j])
		}
		i = j + 1
	}
	return b.String()
}
