package jobs

import (
	"fmt"
	"strings"

	"github.com/riverqueue/river"
	"github.com/riverqueue/river/rivertype"
)

// Indices of the two tasks of a print that are no tiles.
const (
	planIndex     = -1
	assemblyIndex = -2
)

// ticket names one try at one task. A task that is begun again gets another
// try, and all that is written carries it: what comes late fits nowhere.
type ticket struct {
	Print int64 `json:"print"`
	Index int   `json:"index"` // of the tile, or planIndex, assemblyIndex
	Try   int   `json:"try"`
}

// String names the task to a person.
func (t ticket) String() string {
	switch t.Index {
	case planIndex:
		return fmt.Sprintf("the plan of print %d", t.Print)
	case assemblyIndex:
		return fmt.Sprintf("assembling print %d", t.Print)
	}
	return fmt.Sprintf("tile %d of print %d", t.Index, t.Print)
}

// The kinds of River jobs, all of one shape.
type (
	planArgs     struct{ ticket }
	tileArgs     struct{ ticket }
	assemblyArgs struct{ ticket }
)

// Kind names the job in River's table.
func (planArgs) Kind() string { return "leadline_plan" }

// Kind names the job in River's table.
func (tileArgs) Kind() string { return "leadline_tile" }

// Kind names the job in River's table.
func (assemblyArgs) Kind() string { return "leadline_assemble" }

// args is the ticket as River's arguments.
func (t ticket) args() river.JobArgs {
	switch t.Index {
	case planIndex:
		return planArgs{t}
	case assemblyIndex:
		return assemblyArgs{t}
	}
	return tileArgs{t}
}

// unfinished are the states in which a second job of the same ticket is
// refused.
var unfinished = []rivertype.JobState{rivertype.JobStateAvailable, rivertype.JobStatePending, rivertype.JobStateRunning,
	rivertype.JobStateRetryable, rivertype.JobStateScheduled}

// job is the River job of a ticket. Nothing is ever retried by River: a new
// try is a new ticket.
func (t ticket) job(queue string, priority int) river.InsertManyParams {
	return river.InsertManyParams{Args: t.args(), InsertOpts: &river.InsertOpts{Queue: queue, Priority: priority,
		MaxAttempts: 1, UniqueOpts: river.UniqueOpts{ByArgs: true, ByState: unfinished}}}
}

// queueName is the River queue of a release and its numerics. Workers of
// another never see its jobs.
func queueName(release string, numerics int) string {
	words := strings.FieldsFunc(strings.ToLower(release), func(r rune) bool {
		return (r < 'a' || r > 'z') && (r < '0' || r > '9')
	})
	return fmt.Sprintf("leadline-%s-n%d", strings.Join(words, "-"), numerics)
}
