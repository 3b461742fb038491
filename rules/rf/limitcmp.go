package rf

// Slack keeps a figure that equals its limit from failing by the last bit of a
// binary fraction. It is no tolerance: tolerances of instruments are rows of data.
const Slack = 1e-9

// Exceeds reports whether v breaks an upper limit. Equal passes; a figure or a
// limit that is no number (NaN) never does.
func Exceeds(v, limit float64) bool { return !(v <= limit+Slack) }

// Below reports whether v breaks a lower limit. Equal passes; a figure or a limit
// that is no number (NaN) never does.
func Below(v, limit float64) bool { return !(v >= limit-Slack) }
