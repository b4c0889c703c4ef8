package frame

import (
	"fmt"
	"math"
	"unicode/utf8"

	"leadline/palette"
)

// bindInk binds the colours of a frame.
func bindInk(o *object, k *Ink) {
	if r := o.object("ramp", optional); r != nil {
		k.Ramp = &Ramp{}
		bindRamp(r, k.Ramp)
	}
	bindDrive(o.object("drive", optional), &k.Drive)
	var inside palette.Colour
	if o.colour("inside", optional, &inside) {
		k.Inside = &inside
	}
	if e := o.object("edge", optional); e != nil {
		k.Edge = &Edge{}
		e.textual("width", required, &k.Edge.Width)
		e.colour("colour", required, &k.Edge.Colour)
		e.done()
	}
	if b := o.object("baked", optional); b != nil {
		k.Baked = &Baked{}
		bindBaked(b, k.Baked)
	}
	o.done()
}

func bindRamp(o *object, r *Ramp) {
	o.items("stops", required, MinStops, MaxStops, func(path string, n *node) {
		var s Stop
		if so := o.c.entry(path, n); so != nil {
			so.number("at", required, &s.At)
			so.colour("colour", required, &s.Colour)
			so.done()
		}
		r.Stops = append(r.Stops, s)
	})
	o.flag("smooth", &r.Smooth)
	o.done()
}

// entry is the object an array's entry must be.
func (c *collector) entry(path string, n *node) *object {
	if n.kind != anObject {
		c.addf(path, "", "must be %s, not %s", anObject, n.kind)
		return nil
	}
	return &object{c: c, path: path, n: n}
}

func bindDrive(o *object, d *Drive) {
	o.text("scale", optional, (*string)(&d.Scale))
	o.number("exponent", optional, &d.Exponent)
	o.maybe("base", &d.Base)
	o.number("period", optional, &d.Period)
	o.maybe("offset", &d.Offset)
	if f := o.object("fit", optional); f != nil {
		d.Fit = &Fit{}
		f.number("low", required, &d.Fit.Low)
		f.number("high", required, &d.Fit.High)
		f.done()
	}
	if f := o.object("fitted", optional); f != nil {
		d.Fitted = &Fitted{}
		f.number("base", required, &d.Fitted.Base)
		f.number("low", required, &d.Fitted.Low)
		f.number("high", required, &d.Fitted.High)
		f.done()
	}
	o.nonzero("scale", "exponent", "period")
	o.done()
}

func bindBaked(o *object, b *Baked) {
	o.text("space", required, &b.Space)
	o.textual("ramp", required, &b.Ramp)
	o.codes("inside", required, &b.Inside)
	edge := new([3]uint16)
	if o.codes("edge", optional, edge) {
		b.Edge = edge
	}
	o.done()
}

// codes binds three 16-bit codes and reports whether the key is there.
func (o *object) codes(key string, must need, to *[3]uint16) bool {
	i := 0
	o.items(key, must, 3, 3, func(path string, n *node) {
		v, ok := 0.0, n.kind == aNumber
		if ok {
			if v, ok = o.c.float(path, n.text); !ok {
				return
			}
		}
		if !ok || v != math.Trunc(v) || v < 0 || v > math.MaxUint16 {
			o.c.addf(path, fmt.Sprintf("a whole number from 0 to %d", math.MaxUint16), "is not a 16-bit code")
			return
		}
		to[i] = uint16(v)
		i++
	})
	return i == len(to)
}

// check holds the ink against its rules.
func (k Ink) check(c *collector) {
	if k.Ramp != nil {
		k.Ramp.check(c, "ink.ramp")
	}
	k.Drive.check(c)
	if k.Inside != nil {
		c.colour("ink.inside", *k.Inside)
	}
	if e := k.Edge; e != nil {
		if e.Width.IsZero() {
			c.add("ink.edge.width", "is required", "0mm is no edge")
		}
		c.colour("ink.edge.colour", e.Colour)
	}
	if b := k.Baked; b != nil {
		c.oneOf("ink.baked.space", b.Space, spaces...)
		if k.Edge != nil && b.Edge == nil {
			c.add("ink.baked.edge", "is required beside ink.edge",
				"take ink.baked out; it is made again when the frame is rendered")
		}
	}
}

// check holds a ramp at a path against its rules.
func (r Ramp) check(c *collector, path string) {
	path = join(path, "stops")
	if len(r.Stops) < MinStops || len(r.Stops) > MaxStops {
		c.addf(path, "", "has %d entries, not from %d to %d", len(r.Stops), MinStops, MaxStops)
		return
	}
	ascend := true
	for i, s := range r.Stops {
		at := fmt.Sprintf("%s[%d]", path, i)
		c.within(at+".at", s.At, 0, 1)
		if i > 0 && s.At <= r.Stops[i-1].At {
			c.addf(at+".at", "stops ascend; give each its own place", "%s does not come after %s",
				short(s.At), short(r.Stops[i-1].At))
			ascend = false
		}
		c.colour(at+".colour", s.Colour)
	}
	n := len(r.Stops) - 1
	if first := r.Stops[0].At; ascend && first > 0 && first < 1 {
		c.addf(path+"[0].at", "repeat its colour at 0", "%s: the first must be at 0", short(first))
	}
	if last := r.Stops[n].At; ascend && last > 0 && last < 1 {
		c.addf(fmt.Sprintf("%s[%d].at", path, n), "repeat its colour at 1", "%s: the last must be at 1", short(last))
	}
}

func (d Drive) check(c *collector) {
	if d.Scale != "" {
		c.oneOf("ink.drive.scale", string(d.Scale), string(Linear), string(Log), string(Power))
	}
	if d.Exponent != 0 {
		c.above("ink.drive.exponent", d.Exponent, MaxPower)
		if d.Scale != Power {
			c.add("ink.drive.exponent", "belongs to the power scale alone", "take it out, or set the scale to power")
		}
	}
	if d.Base != nil {
		c.within("ink.drive.base", *d.Base, -MaxCount, MaxCount)
	}
	if d.Offset != nil {
		c.within("ink.drive.offset", *d.Offset, -MaxCount, MaxCount)
	}
	if d.Period != 0 {
		c.above("ink.drive.period", d.Period, MaxCount)
	}
	d.checkFit(c)
}

func (d Drive) checkFit(c *collector) {
	const cure = "take it out, or the period"
	if f := d.Fit; f != nil {
		c.within("ink.drive.fit.low", f.Low, 0, 100)
		c.within("ink.drive.fit.high", f.High, 0, 100)
		if f.Low >= f.High {
			c.addf("ink.drive.fit.low", "percentiles ascend", "%s is not below high, %s", short(f.Low), short(f.High))
		}
		if d.Period != 0 {
			c.add("ink.drive.fit", "has no use beside a period", cure)
		}
	}
	if f := d.Fitted; f != nil {
		c.within("ink.drive.fitted.base", f.Base, -MaxCount, MaxCount)
		c.within("ink.drive.fitted.low", f.Low, -MaxCount, MaxCount)
		c.within("ink.drive.fitted.high", f.High, -MaxCount, MaxCount)
		if f.Low > f.High {
			c.addf("ink.drive.fitted.low", "", "%s is above high, %s", short(f.Low), short(f.High))
		}
		if d.Period != 0 {
			c.add("ink.drive.fitted", "has no use beside a period", cure)
		}
	}
}

// colour checks that a colour's text can be read again.
func (c *collector) colour(path string, v palette.Colour) {
	if n := utf8.RuneCountInString(v.String()); n > MaxColour {
		c.addf(path, fmt.Sprintf("a colour has at most %d", MaxColour), "has %d characters", n)
	} else if _, err := palette.ParseColour(v.String()); err != nil {
		c.add(path, err.Error(), hintOf(err))
	}
}
