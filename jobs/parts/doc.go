// Package parts makes one print as n independent tasks that share nothing but
// a folder, the way a batch system's array of tasks works: each renders one
// horizontal stripe, in any order, on any machine, and a last step joins them.
//
// The folder holds print.json (which print, cut into how many), shared (the
// frozen frame and the reference orbit, computed once) and a file a stripe,
// part-0007-of-0040. Every file carries its checksum and the print's identity,
// and appears under its name only when it is whole and on disk; a task may be
// killed, run twice, or run at once by two machines, and nothing comes of it
// but lost time. Memory holds a few bands of the print, whatever its height.
//
// The package knows files only: no database, no scheduler, no network. What a
// stripe's pixels are is decided by package render alone, so that the joined
// print is the very file that one process would have made.
package parts
