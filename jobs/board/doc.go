// Package board serves a queue as a web page: prints with their pictures as
// they grow, the workers, and River's own page of the jobs. It holds everything
// about HTTP (address, TLS, token, headers, pages) and must not know how prints
// are made or kept: it calls a Queue and shows what comes back.
package board
