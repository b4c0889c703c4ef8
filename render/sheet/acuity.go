package sheet

// acuity is 25.4 mm / tan(1'): the ppi-millimetres at which one pixel spans
// one minute of arc, the limit of 20/20 sight. tan(1') = 2.9088821687e-4.
const acuity = 25.4 / 2.9088821687e-4

// AcuityPPI is the resolution, in pixels an inch, beyond which an eye of 20/20
// sight (one minute of arc) sees no more from mm millimetres away. More than
// that is spent on looking closer.
func AcuityPPI(mm float64) float64 { return acuity / mm }
