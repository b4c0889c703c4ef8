// Package jobs is the queue: prints that go on after a crash, a reboot or a
// full disk, on one desk or on many machines.
//
// A Queue is opened on an SQLite file or a PostgreSQL database; one code path
// serves both. A print is cut into tiles; plan, tiles and assembly are tasks,
// and River hands each out as a job. River is the dispatcher only: what is done
// and who holds what stands in tables of our own, and every task is fenced by
// its try. The package knows no screen, no flag and no exit code.
package jobs
