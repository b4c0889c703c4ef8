package board

import (
	"context"
	"crypto/tls"
	"errors"
	"fmt"
	"log/slog"
	"net"
	"net/http"
	"net/url"
	"os"
	"strings"
	"syscall"
	"time"
)

// DefaultListen is where a board is unless told otherwise: 5323 is LEAD on a
// telephone's keys.
const DefaultListen = "127.0.0.1:5323"

// Options say where and how a board is served. The zero value works.
type Options struct {
	Listen      string       // HOST:PORT; "": DefaultListen. Beyond loopback Token, Certificate and Key are required
	Token       string       // "": a fresh one is made
	Certificate string       // PEM file of the certificate and those that signed it; "": plain HTTP
	Key         string       // PEM file of its key
	River       http.Handler // answers under RiverPrefix; nil: nothing does
	Log         *slog.Logger // what goes wrong inside; nil: nothing
}

// OptionError refuses a choice that will not do.
type OptionError struct{ What, Cure string }

func (e *OptionError) Error() string { return e.What }

// Hint says what will.
func (e *OptionError) Hint() string { return e.Cure }

// Server is a board that listens.
type Server struct {
	http   *http.Server
	listen net.Listener
	url    url.URL
	log    *slog.Logger
}

// Listen opens the board's address; Serve answers on it. *OptionError where the
// options are not safe together.
func Listen(ctx context.Context, q Queue, o Options) (*Server, error) {
	if o.Listen == "" {
		o.Listen = DefaultListen
	}
	if o.Log == nil {
		o.Log = slog.New(slog.DiscardHandler)
	}
	loopback, err := o.check(ctx)
	if err != nil {
		return nil, err
	}
	certificate, err := o.certificate()
	if err != nil {
		return nil, err
	}
	l, err := open(ctx, o.Listen)
	if err != nil {
		return nil, err
	}
	if at, ok := l.Addr().(*net.TCPAddr); loopback && (!ok || !at.IP.IsLoopback()) {
		l.Close()
		return nil, beyond(l.Addr().String())
	}
	s := &Server{listen: l, log: o.Log, url: url.URL{Scheme: "http", Host: shown(o.Listen, l), Path: "/"}}
	if certificate != nil {
		s.url.Scheme = "https"
		s.listen = tls.NewListener(l, certificate)
	}
	token := o.Token
	if token == "" {
		token = freshToken()
		s.url.RawQuery = url.Values{tokenField: {token}}.Encode()
	}
	g := &guard{pass: newPass(token), local: loopback, secure: certificate != nil, port: port(l)}
	s.http = &http.Server{
		Handler:           g.around(newPages(q, o.River, o.Log)),
		ReadHeaderTimeout: 10 * time.Second, ReadTimeout: time.Minute, WriteTimeout: time.Minute, IdleTimeout: 2 * time.Minute,
		MaxHeaderBytes: 32 << 10,
		ErrorLog:       slog.NewLogLogger(o.Log.Handler(), slog.LevelDebug), // strangers' broken handshakes,
	}
	return s, nil
}

// Address is what opens the board in a browser. It holds the token where Listen
// made one, and only then.
func (s *Server) Address() string { return s.url.String() }

// Serve answers until the context ends, lets what is under way finish, and
// returns nil then. It closes the address.
func (s *Server) Serve(ctx context.Context) error {
	ended := make(chan error, 1)
	go func() { ended <- s.http.Serve(s.listen) }()
	select {
	case err := <-ended:
		return fmt.Errorf("serving the board: %w", err)
	case <-ctx.Done():
	}
	stop, cancel := context.WithTimeout(context.WithoutCancel(ctx), 3*time.Second)
	defer cancel()
	if err := s.http.Shutdown(stop); err != nil {
		s.log.Warn("requests were cut off", "error", err)
		s.http.Close()
	}
	<-ended
	return nil
}

// check says whether only this machine reaches the address, and refuses
// options that are not safe together.
func (o *Options) check(ctx context.Context) (loopback bool, err error) {
	if (o.Certificate == "") != (o.Key == "") {
		return false, &OptionError{"a certificate and its key come together", "give both, or neither on loopback"}
	}
	if o.Token != "" {
		if err := checkToken(o.Token); err != nil {
			return false, err
		}
	}
	host, _, err := net.SplitHostPort(o.Listen)
	if err != nil {
		return false, &OptionError{fmt.Sprintf("%q is not an address to listen on", o.Listen), "write HOST:PORT, for instance " + DefaultListen}
	}
	if loopback, err = isLoopback(ctx, host); err != nil {
		return false, err
	}
	if !loopback && (o.Certificate == "" || o.Token == "") {
		return false, beyond(o.Listen)
	}
	return loopback, nil
}

func beyond(where string) error {
	return &OptionError{where + " is reached from other machines, which takes TLS and a token of yours",
		"add --certificate FILE --key FILE --token-file FILE, or keep to loopback\n" +
			"and reach it from elsewhere with ssh -L 5323:" + DefaultListen + " HOST"}
}

// isLoopback says whether all addresses of a host are this machine's own.
func isLoopback(ctx context.Context, host string) (bool, error) {
	if host == "" {
		return false, nil // every address
	}
	all, err := net.DefaultResolver.LookupNetIP(ctx, "ip", host)
	if err != nil {
		return false, &OptionError{fmt.Sprintf("%q is not a host to listen on: %v", host, err), "write HOST:PORT, for instance " + DefaultListen}
	}
	for _, a := range all {
		if !a.Unmap().IsLoopback() {
			return false, nil
		}
	}
	return len(all) > 0, nil
}

// certificate is the TLS side; nil for plain HTTP.
func (o *Options) certificate() (*tls.Config, error) {
	if o.Certificate == "" {
		return nil, nil
	}
	if f, err := os.Open(o.Key); err == nil { // LoadX509KeyPair says it where there is none
		err = private(f, "key")
		f.Close()
		if err != nil {
			return nil, err
		}
	}
	c, err := tls.LoadX509KeyPair(o.Certificate, o.Key)
	if err != nil {
		return nil, fmt.Errorf("reading certificate and key: %w", err)
	}
	return &tls.Config{Certificates: []tls.Certificate{c}, MinVersion: tls.VersionTLS12, NextProtos: []string{"http/1.1"}}, nil
}

// inUseError says that somebody listens there already.
type inUseError struct{ err error }

func (e *inUseError) Error() string { return e.err.Error() }
func (e *inUseError) Unwrap() error { return e.err }

// Hint says how to get a free port.
func (e *inUseError) Hint() string {
	return "another board may run already; --listen 127.0.0.1:0 takes any free port"
}

func open(ctx context.Context, where string) (net.Listener, error) {
	var c net.ListenConfig
	l, err := c.Listen(ctx, "tcp", where)
	switch {
	case errors.Is(err, syscall.EADDRINUSE):
		return nil, &inUseError{err}
	case err != nil:
		return nil, fmt.Errorf("opening the board's address: %w", err)
	}
	return l, nil
}

// port is the one that is listened on.
func port(l net.Listener) string {
	_, p, _ := net.SplitHostPort(l.Addr().String()) // a TCP address has one
	return p
}

// shown is the host and port for people: as asked for, the machine's name for
// every address, and the port that was taken for 0.
func shown(asked string, l net.Listener) string {
	host, _, _ := net.SplitHostPort(asked) // checked before
	if ip := net.ParseIP(strings.Trim(host, "[]")); host == "" || ip != nil && ip.IsUnspecified() {
		if name, err := os.Hostname(); err == nil {
			host = name
		}
	}
	return net.JoinHostPort(host, port(l))
}
