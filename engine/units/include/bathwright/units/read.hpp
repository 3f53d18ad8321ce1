// Reads what people type: a number and its unit. Not for: files with a number column (data/csv.hpp).
// Read next: show.hpp, the way back.
//
// Common to all readers:
//   text   a number, then a unit. Decimal point or decimal comma. A space before the unit is optional; case
//   is
//          ignored except for the molar symbols M, mM and N; "°C", "dm²", "µL" and "degC", "dm2", "uL" are
//          the same.
//   where  the place to name in a message ("baths/nickel.toml:14: volume"); may be empty
// Refused with a message that says how to write it: no number, no unit, a unit of something else, a unit that
// means two things ("gal", "ppm", "%"), a thousands separator or what may be one ("1,234.5"; "1,250 kg"), a
// negative value (except a temperature), anything not finite or beyond what can exist.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/concentration.hpp>
#include <bathwright/units/quantity.hpp>
#include <string_view>

namespace bathwright::units {

/// L, mL, uL, m3, dm3, cm3, US gal, imp gal, fl oz (US).
Result<Litres> read_volume(std::string_view text, std::string_view where = {});

/// kg, g, mg, t, lb, oz (avoirdupois), oz tr (troy), dwt.
Result<Kilograms> read_mass(std::string_view text, std::string_view where = {});

/// degC, degF, K; not below absolute zero.
Result<Celsius> read_temperature(std::string_view text, std::string_view where = {});

/// kg/L, g/mL, g/cm3, g/L, kg/m3, and the hydrometer scales SG, degBe (heavy, modulus 145), degBe light,
/// degTw:
///   SG = 145/(145 - Be)   SG = 140/(130 + Be) light   SG = 1 + Tw/200   density = SG * 0.99904 kg/L
/// SG is relative to water, 60F/60F; water weighs 0.99904 kg/L at 60 F. Scales: NBS Circular 59; practice of
/// the trade.
Result<KilogramsPerLitre> read_density(std::string_view text, std::string_view where = {});

/// mm, cm, dm, m, in, ft, and um, mil, uin for deposits.
Result<Decimetres> read_length(std::string_view text, std::string_view where = {});

/// dm2, cm2, mm2, m2, ft2, in2.
Result<SquareDecimetres> read_area(std::string_view text, std::string_view where = {});

/// A/dm2, mA/cm2, A/m2, A/ft2.
Result<AmperesPerSquareDecimetre> read_current_density(std::string_view text, std::string_view where = {});

/// s, min, h, d.
Result<Hours> read_duration(std::string_view text, std::string_view where = {});

/// mol/L (also M), mmol/L (also mM).
Result<MolesPerLitre> read_molarity(std::string_view text, std::string_view where = {});

/// A share between 0 and 1. "99 %", or a bare "0.99": the one reader that takes a number without a unit,
/// because a share has none; a bare number above 1 is refused ("99" may be a per cent).
Result<double> read_fraction(std::string_view text, std::string_view where = {});

/// Every unit of ConcentrationUnit. "0.2 N (2 eq/mol)" carries its equivalents; N without them is refused, as
/// are
/// "%", "ppm" and "oz/gal", which each mean more than one thing.
Result<Concentration> read_concentration(std::string_view text, std::string_view where = {});

}  // namespace bathwright::units
