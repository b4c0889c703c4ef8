// Package prints is the Queue screen: the prints of the queue with how far they
// are and how long they take, the workers and what they hold, the chosen print's
// picture as it grows, and the actions on prints. It can work on the queue itself,
// beside other processes.
//
// The queue is asked in the background, one question at a time; what comes back
// carries a generation, so that an answer from before a change shows nothing that
// is no longer so. The package knows the queue by the methods it calls and must
// not know how prints are kept or made.
package prints
