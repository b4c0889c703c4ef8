package kernel

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"
	"testing"
)

// Samples are the same to the last bit on every machine. The sums below are of
// this package's own making, computed on amd64; what they prove is that other
// processors, compilers and build tags come to the same. A change here changes
// pictures, and is a change of the numerics' number.

// identity hashes state, count, smooth count and distance of 200 samples.
func identity(s *scene) string {
	h := sha256.New()
	for _, p := range s.spread(200, 40) {
		f := s.kernel.Sample(p[0], p[1])
		for _, v := range []uint64{uint64(f.State), uint64(f.N), math.Float64bits(f.Smooth), math.Float64bits(f.Distance)} {
			h.Write(binary.BigEndian.AppendUint64(nil, v))
		}
	}
	return hex.EncodeToString(h.Sum(nil))
}

func holdIdentity(t *testing.T, want string, s *scene, regime string) {
	t.Helper()
	if s.build(t); s.regime() != regime {
		t.Fatalf("%s runs in the %s regime", s.name, s.regime())
	}
	if got := identity(s); got != want {
		t.Errorf("%s: samples hash to %s, not %s", s.name, got, want)
	}
}

func TestIdentityDirect(t *testing.T) {
	holdIdentity(t, "baae1fdb90328497d71a7b4103c68a33bb417c1822cdd6cfc7620142aee9ed51", &scene{name: "whole", re: "-0.6", height: "2.6", limit: 500}, "direct")
}

func TestIdentityDouble(t *testing.T) {
	s := small(t, "embedded-1e-60")
	holdIdentity(t, "0f2ca8f5023b810b7ce9bc158fb88be1a5aaa428a4db86cd5381b7ce287f6498", &s, "double")
}

func TestIdentityTurned(t *testing.T) {
	s := small(t, "minibrot-1e-30")
	s.cos, s.sin = 0.8, 0.6
	holdIdentity(t, "d1fc469f60de7d7ac1df1789b5b1e32bded4a69eb28b77cec2c807fe25fa7119", &s, "double")
}

func TestIdentityDeep(t *testing.T) {
	s := small(t, "range-edge-1e-305")
	holdIdentity(t, "1c58ef8267ed5202a33769134d1a92e2886b5a6bddb226db75db547046dacb99", &s, "deep")
}

func TestIdentityDeepest(t *testing.T) {
	s := deepSet(t)
	holdIdentity(t, "8f2c1846e2b499d51fc6eef1e3d2a09ca26854aaab46e2d9ebe5cd8a30dedf7c", &s, "deep")
}

func TestIdentityJulia(t *testing.T) {
	s := small(t, "julia-cycle-1e-60")
	holdIdentity(t, "a0a59cb68173f0777e39414da9018d50f521b15c46b17c7d8b670f03c3d791fa", &s, "double")
}

func TestIdentityJuliaDirect(t *testing.T) {
	holdIdentity(t, "581c3af5a343ba635f4f8977f3c9a1dcbf7c6e0c454e0515c8048770ee5689e5", &scene{name: "julia", height: "2.6", julia: true, power: 3,
		paramRe: "0.4178", paramIm: "0.3261", limit: 500}, "direct")
}

func TestIdentityCubic(t *testing.T) {
	s := small(t, "cubic-1e-60")
	holdIdentity(t, "4767c87f7a3e9a26b0f30ea585605ac01644248b788337df3fa390d3dbd52347", &s, "double")
}

func TestIdentityCubicDirect(t *testing.T) {
	holdIdentity(t, "6575f46eca4670e4358f595621508af174fe79fb1964cc05679ce828cf83715c", &scene{name: "cubic", height: "2.6", power: 3, limit: 500}, "direct")
}
