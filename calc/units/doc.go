// Package units reads quantities as engineers write them and turns them into
// coherent SI, by exact factors, refusing to guess.
//
// The tables are data that an engineer can check: units.csv (what a unit is
// worth, with its source), spellings.csv (what is read and never written) and
// advice.csv (what to write instead of a trap).
//
// Grammar. A quantity is the longest JSON number, optional blanks and a unit; a
// tolerance may follow. A unit is made of products (. · *), quotients (/), powers
// (m2 m^2 m² s-1) and parentheses. As in UCUM it is worked from left to right:
// W/m2.K is (W/m2).K, and the dimension check finds who meant W/(m2.K). A blank
// is no product, except inside names that stand in spellings.csv.
//
// Conventions, where a name has several:
//   - in ft yd mi are international; the survey ones are ft_us_survey and so on.
//   - gal is refused: gal_us or gal_imp. gpm is US gallons, igpm imperial ones.
//   - ton is refused: t, ton_short, ton_long, TR. oz is a mass. bbl is 42 gal_us.
//   - mmHg and inHg are conventional mercury (13595.1 kg/m3), inH2O and mH2O
//     conventional water (1000 kg/m3), both at 9.80665 m/s2; inH2O_39F and
//     inH2O_60F are the warm ones. torr is atm/760.
//   - BTU is the International Table one, cal the thermochemical one of UCUM;
//     cal_IT, cal_th, BTU_th say which. hp is 550 ft.lbf/s.
//   - Nm3 is at 273.15 K and 101325 Pa, Sm3 at 288.15 K and 101325 Pa, SL at
//     273.15 K and 100000 Pa, scf at 60 degF and 14.696 psi. M alone before a
//     customary unit is refused (thousand or million), except Mgal_us.
//   - A valid UCUM code keeps its meaning (m[Hg], cal, mph), except the names
//     at, ft, TR, which the trade has taken, and mol, which is the SI unit
//     and not a number. Logarithmic and arbitrary units of UCUM are refused, and
//     its values of measured constants are replaced by the exact ones of the SI.
//   - rad is kept apart from 1, so that an angle is never read as a ratio.
//   - K and degR serve as a point and as a difference; degC and degF are points,
//     and degC_diff and degF_diff differences.
//   - A state pressure says absolute (bara, bar(a), bar_abs) or gauge (barg,
//     bar(g), bar_gauge). A gauge value is kept as gauge: the caller adds the
//     atmosphere of the site.
package units
