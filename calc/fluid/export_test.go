package fluid

// SteamDensity is the density of region 2 without the rule of 0.5 K, for a
// printed value that lies nearer to saturation.
func SteamDensity(s StatePoint) float64 { return region2(s).density }
