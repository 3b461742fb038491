package mech

// Separation is the distance in m that metal keeps from a lightning protection
// system, so that no spark leaps over: s = ki·kc/km·l, with ki by the class of the
// system, kc by the down conductors that share the current, km by what lies between,
// and l in m along a conductor to the next equipotential bond (IEC 62305-3:2010, 6.3
// and tables 10 to 12; read). Any consistent unit of length will do.
func Separation(ki, kc, km, l float64) (float64, bool) {
	if !positive(ki, kc, km) || !notNegative(l) {
		return 0, false
	}
	return figure(ki * kc / km * l)
}
