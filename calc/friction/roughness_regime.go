package friction

// The bounds of the roughness regimes, as roughness Reynolds numbers u* ε/ν: smooth
// below the first, rough above the second, transitional between and at both.
// Source: Nikuradse, VDI-Forschungsheft 361, 1933; Schlichting, Boundary-Layer
// Theory (from memory).
const (
	SmoothBelow = 5
	RoughAbove  = 70
)

func roughnessRegime(plus float64) RoughnessRegime {
	switch {
	case plus < SmoothBelow:
		return HydraulicallySmooth
	case plus <= RoughAbove:
		return TransitionallyRough
	}
	return FullyRough
}

// String is the name of the roughness regime in the contract, empty for none.
func (r RoughnessRegime) String() string {
	switch r {
	case HydraulicallySmooth:
		return "smooth"
	case TransitionallyRough:
		return "transitional"
	case FullyRough:
		return "rough"
	}
	return ""
}

// String is the name of the diameter rule in the contract.
func (r DiameterRule) String() string {
	switch r {
	case HydraulicDiameter:
		return "hydraulic"
	case LaminarEquivalentDiameter:
		return "laminar_equivalent"
	}
	return "unknown"
}
