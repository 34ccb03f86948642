package fluid

// SteamDensity is the density of region 2 without the rule of 0.5 K, for a
// printed value that lies nearer to saturation.
func SteamDensity(s StatePoint) float64 { return region2(s).density }

// AirViscosity is the viscosity of air at a temperature and a molar density.
func AirViscosity(temperature, molarDensity float64) float64 {
	return airViscosity(molarDensity/airMolarDensity, temperature)
}
