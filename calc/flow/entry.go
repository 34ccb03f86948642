package flow

import (
	"math"

	"borewright/calc"
)

// entry sets the entry length, the larger where both regimes can occur: a caution
// about developing flow is then not missed.
func (r *Regime) entry(diameter float64) {
	laminar, turbulent := calc.Optional{}, calc.Optional{}
	if r.CanBeLaminar {
		laminar = calc.Some(laminarEntryDiameters(r.Reynolds) * diameter)
		r.EntryLength = laminar
	}
	if r.CanBeTurbulent {
		turbulent = calc.Some(turbulentEntryDiameters(r.Reynolds) * diameter)
		r.EntryLength = calc.Some(math.Max(laminar.Value, turbulent.Value))
	}
	if r.CanBeLaminar && r.CanBeTurbulent {
		r.EntryIfLaminar, r.EntryIfTurbulent = laminar, turbulent
	}
}

// laminarEntryDiameters is Le/D = (0.619^1.6 + (0.0567 Re)^1.6)^(1/1.6) for a round
// pipe. It is preferred to the customary 0.06 Re because it also holds down to
// creeping flow, where 0.06 Re vanishes and the true length is 0.6 diameters; at Re
// 2000 the two differ by 6 %. Source: Durst et al. 2005, J. Fluids Eng. 127, 1154
// (from memory).
func laminarEntryDiameters(reynolds float64) float64 {
	const creeping = 0.46419989558552587 // 0.619^1.6
	return math.Pow(creeping+math.Pow(0.0567*reynolds, 1.6), 1/1.6)
}

// turbulentEntryDiameters is Le/D = 1.359 Re^(1/4). It follows from a boundary layer
// with the one-seventh profile that grows to the axis, and has a source that can be
// named; the customary 4.4 Re^(1/6) gives half more at Re 1e4 and a quarter less
// at Re 4e7. Source: Bhatti & Shah 1987, Handbook of Single-Phase Convective Heat
// Transfer, chapter 4 (from memory).
func turbulentEntryDiameters(reynolds float64) float64 {
	return 1.359 * math.Sqrt(math.Sqrt(reynolds))
}
