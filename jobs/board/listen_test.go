package board

import (
	"context"
	"crypto/ecdsa"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/tls"
	"crypto/x509"
	"crypto/x509/pkix"
	"encoding/pem"
	"errors"
	"math/big"
	"net"
	"net/http"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// selfMade writes a certificate for 127.0.0.1 and its key.
func selfMade(t *testing.T) (certificate, key string, roots *x509.CertPool) {
	t.Helper()
	k, err := ecdsa.GenerateKey(elliptic.P256(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	c := &x509.Certificate{SerialNumber: big.NewInt(1), Subject: pkix.Name{CommonName: "board"}, NotAfter: time.Now().Add(time.Hour),
		IPAddresses: []net.IP{net.IPv4(127, 0, 0, 1)}, KeyUsage: x509.KeyUsageDigitalSignature, IsCA: true, BasicConstraintsValid: true}
	der, err := x509.CreateCertificate(rand.Reader, c, c, k.Public(), k)
	if err != nil {
		t.Fatal(err)
	}
	private, err := x509.MarshalPKCS8PrivateKey(k)
	if err != nil {
		t.Fatal(err)
	}
	write := func(name, kind string, b []byte) string {
		path := filepath.Join(t.TempDir(), name)
		if err := os.WriteFile(path, pem.EncodeToMemory(&pem.Block{Type: kind, Bytes: b}), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	certificate, key = write("board.pem", "CERTIFICATE", der), write("board.key", "PRIVATE KEY", private)
	roots = x509.NewCertPool()
	parsed, err := x509.ParseCertificate(der)
	if err != nil {
		t.Fatal(err)
	}
	roots.AddCert(parsed)
	return certificate, key, roots
}

// TestUnsafe refuses to listen beyond loopback without TLS and a token.
func TestUnsafe(t *testing.T) {
	t.Parallel()
	certificate, key, _ := selfMade(t)
	bare := filepath.Join(t.TempDir(), "bare.key")
	if b, err := os.ReadFile(key); err != nil || os.WriteFile(bare, b, 0o644) != nil || os.Chmod(bare, 0o644) != nil {
		t.Fatal(err)
	}
	for name, o := range map[string]Options{
		"a key for all": {Listen: "0.0.0.0:0", Token: testToken, Certificate: certificate, Key: bare},
		"nothing":       {Listen: "0.0.0.0:0"},
		"empty host":    {Listen: ":0"},
		"IPv6":          {Listen: "[::]:0"},
		"other address": {Listen: "192.0.2.1:5323"}, // RFC 5737
		"token alone":   {Listen: "0.0.0.0:0", Token: testToken},
		"TLS alone":     {Listen: "0.0.0.0:0", Certificate: certificate, Key: key},
		"half of TLS":   {Listen: "127.0.0.1:0", Certificate: certificate},
		"other half":    {Listen: "127.0.0.1:0", Key: key},
		"short token":   {Listen: "127.0.0.1:0", Token: "short"},
		"no port":       {Listen: "127.0.0.1"},
		"no address":    {Listen: "a:b:c"},
	} {
		s, err := Listen(t.Context(), secrets(), o)
		var refused *OptionError
		if !errors.As(err, &refused) || refused.Hint() == "" || s != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestTLS serves beyond loopback as allowed, and checks what changes with TLS.
func TestTLS(t *testing.T) {
	t.Parallel()
	certificate, key, roots := selfMade(t)
	s, err := Listen(t.Context(), secrets(), Options{Listen: "0.0.0.0:0", Token: testToken, Certificate: certificate, Key: key})
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() { ended <- s.Serve(ctx) }()
	u, err := url.Parse(s.Address())
	if err != nil || u.Scheme != "https" || u.RawQuery != "" {
		t.Fatalf("address %s, %v", s.Address(), err)
	}
	at := "https://127.0.0.1:" + u.Port()
	b := &served{t, at, &http.Client{Timeout: 20 * time.Second, Transport: &http.Transport{TLSClientConfig: &tls.Config{RootCAs: roots}, DisableKeepAlives: true}}}
	b.browser()
	if a := b.ask("GET", "/"); a.StatusCode != http.StatusUnauthorized {
		t.Errorf("without the token: %s", a.Status)
	}
	a := b.ask("GET", "/?token="+testToken, "Host", "board.example") // the certificate is what names the host
	if a.StatusCode != http.StatusOK || !strings.Contains(a.body, "Secret reef") {
		t.Errorf("with the token: %s", a.Status)
	}
	raw, err := http.NewRequest("GET", at+"/?token="+testToken, nil)
	if err != nil {
		t.Fatal(err)
	}
	first, err := b.client.Transport.RoundTrip(raw)
	if err != nil {
		t.Fatal(err)
	}
	first.Body.Close()
	// __Host- takes Secure, Path=/ and no Domain (draft-ietf-httpbis-rfc6265bis, 4.1.3.2).
	if c := first.Cookies(); len(c) != 1 || !c[0].Secure || !c[0].HttpOnly || c[0].Path != "/" || c[0].Domain != "" || !strings.HasPrefix(c[0].Name, "__Host-") {
		t.Errorf("cookies %v", c)
	}
	if a, err := http.Get("http://127.0.0.1:" + u.Port() + "/?token=" + testToken); err == nil && a.StatusCode == http.StatusOK {
		t.Error("answers without TLS")
	}
	old := &tls.Config{RootCAs: roots, MaxVersion: tls.VersionTLS11, MinVersion: tls.VersionTLS10}
	if c, err := tls.Dial("tcp", "127.0.0.1:"+u.Port(), old); err == nil {
		c.Close()
		t.Error("speaks TLS 1.1 (deprecated by RFC 8996)")
	}
	stop()
	if err := <-ended; err != nil {
		t.Error(err)
	}
}

// TestAddress tells a fresh token once and a given one never.
func TestAddress(t *testing.T) {
	t.Parallel()
	s, err := Listen(t.Context(), secrets(), Options{Listen: "localhost:0"})
	if err != nil {
		t.Fatal(err)
	}
	defer s.listen.Close()
	u, err := url.Parse(s.Address())
	if err != nil || u.Scheme != "http" || u.Hostname() != "localhost" || u.Port() == "0" || len(u.Query().Get("token")) < 26 {
		t.Errorf("address %s, %v", s.Address(), err)
	}
	_, err = Listen(t.Context(), secrets(), Options{Listen: "127.0.0.1:" + u.Port(), Token: testToken})
	var hint interface{ Hint() string }
	if !errors.Is(err, syscall.EADDRINUSE) || !errors.As(err, &hint) {
		t.Errorf("an address in use: %v", err)
	}
	g, err := Listen(t.Context(), secrets(), Options{Listen: "127.0.0.1:0", Token: testToken})
	if err != nil {
		t.Fatal(err)
	}
	defer g.listen.Close()
	if strings.Contains(g.Address(), testToken) {
		t.Errorf("the address tells a token that was given: %s", g.Address())
	}
}

// TestServeStops lets an answer that is under way finish.
func TestServeStops(t *testing.T) {
	t.Parallel()
	begun, finish := make(chan struct{}), make(chan struct{})
	slow := http.HandlerFunc(func(w http.ResponseWriter, _ *http.Request) {
		close(begun)
		<-finish
		w.Write([]byte("whole"))
	})
	s, err := Listen(t.Context(), secrets(), Options{Listen: "127.0.0.1:0", Token: testToken, River: slow})
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() { ended <- s.Serve(ctx) }()
	b := &served{t, strings.TrimSuffix(s.Address(), "/"), &http.Client{Timeout: 20 * time.Second}}
	got := make(chan string, 1)
	go func() { got <- b.in("GET", "/river/").body }()
	<-begun
	stop()
	close(finish)
	if body := <-got; body != "whole" {
		t.Errorf("the answer was %q", body)
	}
	if err := <-ended; err != nil {
		t.Error(err)
	}
	if _, err := net.DialTimeout("tcp", s.url.Host, time.Second); err == nil {
		t.Error("the address is still open")
	}
}
