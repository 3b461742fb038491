package rf

import (
	"math"
	"math/cmplx"

	"driploop/catalog/unit"
)

// Shannon is the capacity of a channel in Mbit/s, B·log2(1+SNR) (C. E. Shannon,
// Communication in the presence of noise, Proc. IRE, January 1949).
func Shannon(width unit.MHz, snr unit.DB) (float64, bool) {
	if !positive(float64(width)) {
		return 0, false
	}
	return figure(float64(width) * math.Log2(1+ratio(snr)))
}

// Channel is a matrix of complex gains, a row per receiving and a column per
// transmitting antenna.
type Channel [][]complex128

// CrossPolar is two streams on two polarizations that leak into one another by the
// cross-polar discrimination, not scaled back to unit power.
func CrossPolar(xpd unit.DB) Channel {
	x := complex(math.Pow(10, -float64(xpd)/20), 0)
	return Channel{{1, x}, {x, 1}}
}

// Capacity is log2 det(I + SNR/Nt·H·Hᴴ) in bit/s/Hz, equal power on every antenna
// (I. E. Telatar, Capacity of multi-antenna Gaussian channels, 1999). A ragged or
// empty matrix is not known.
func (h Channel) Capacity(snr unit.DB) (float64, bool) {
	if len(h) == 0 || len(h[0]) == 0 {
		return 0, false
	}
	columns := len(h[0])
	per := complex(ratio(snr)/float64(columns), 0)
	gram := make(Channel, len(h))
	for i, row := range h {
		if len(row) != columns {
			return 0, false
		}
		gram[i] = make([]complex128, len(h))
		for j := range h {
			if len(h[j]) != columns {
				return 0, false
			}
			for k := range columns {
				gram[i][j] += per * row[k] * cmplx.Conj(h[j][k])
			}
		}
		gram[i][i]++
	}
	return figure(gram.log2Det())
}

// log2Det is the logarithm of the determinant of a Hermitian matrix whose
// eigenvalues are all 1 or more, so that elimination needs no pivoting. It eats the
// matrix.
func (h Channel) log2Det() float64 {
	sum := 0.0
	for i := range h {
		sum += math.Log2(real(h[i][i]))
		for j := i + 1; j < len(h); j++ {
			factor := h[j][i] / h[i][i]
			for k := i; k < len(h); k++ {
				h[j][k] -= factor * h[i][k]
			}
		}
	}
	return sum
}

// PolarizationLoss is what two linear polarizations at an angle lose,
// −20·log10 |cos θ|, and no more than the cross-polar discrimination of the pair
// lets through. Calculated.
func PolarizationLoss(deg float64, xpd unit.DB) (unit.DB, bool) {
	if !(xpd >= 0) || !finite(deg) {
		return 0, false
	}
	loss := -20 * math.Log10(math.Abs(math.Cos(deg*math.Pi/180)))
	return known(math.Max(0, min(loss, float64(xpd))))
}
