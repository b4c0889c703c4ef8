// Package printfile holds the files a print is delivered in: it writes and
// reads 16-bit RGB PNG row by row, in bounded memory whatever the height, with
// colour profile, resolution, XMP and texts, and it puts every file in place
// atomically.
//
// A [Writer] gathers rows into strips whose size depends on the width alone.
// Each strip is filtered and compressed by itself, with the end of the strip
// before it as dictionary, and the pieces are joined in order into one zlib
// stream. The bytes of a file are therefore the same for any number of workers
// and any division of the rows among calls. They do depend on the release of
// the deflate library; the pixels, and so the hash of [Hasher], do not.
//
// A file appears under its name only when it is complete and on disk: it is
// written to a hidden, locked part beside the name, synced, renamed, and the
// folder synced. Parts left by dead processes are removed when the same file is
// next written.
//
// The package must not know what a picture shows: frames, sheets, sets and
// colours are bytes and numbers to it.
package printfile
