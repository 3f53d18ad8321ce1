// Parts of a page that several sheets share: levels against their windows, headroom of solids, free ions.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/sheets/standing.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// The tank and its shop left; volume and temperature right.
void tank_title(Lines& lines, const bath::Tank& tank, double volume_L, units::Celsius temperature,
                const Units& units = {});

/// The unit each is shown in, in the solution `in`; of a pH one without a symbol.
[[nodiscard]] std::vector<LevelUnit> units_of(const std::vector<Judged>& judged, const bath::BathType& type,
                                              const Units& units, const Medium& in);
[[nodiscard]] LevelUnit unit_of(const Judged& judged, const bath::BathType& type, const Units& units,
                                const Medium& in);
/// The unit that all levels have, for the head of their table; "" where they differ (N, and g/L of what has
/// no equivalents), so that each is named with its own: named().
[[nodiscard]] std::string common_unit(const std::vector<LevelUnit>& all);
[[nodiscard]] std::string named(const std::string& name, const LevelUnit& unit, const std::string& common);

/// Of a table of levels and pH: the head of its first column, where there is room for g/L, and its heading.
[[nodiscard]] std::string level_head(const std::string& common);
[[nodiscard]] std::string levels_heading(const std::string& words, const std::string& common);

/// To which a level is shown: three figures of its window's upper end, 200.0, 0.100; pH with two decimals.
[[nodiscard]] int decimals_of(const Judged& judged, const LevelUnit& unit);

[[nodiscard]] Lines levels(const std::vector<Judged>& judged, const std::vector<LevelUnit>& units);

/// Room of each watched solid at the working and the idle temperature.
[[nodiscard]] Lines headroom(const bath::Tank& tank, const std::vector<bath::Headroom>& headroom,
                             const Units& units);

/// Species that matter to a level, and the free ions of what is analysed, however little there is of them.
[[nodiscard]] Lines free_ions(const bath::BathType& type, const std::vector<bath::SpeciesView>& species);

/// What would crystallise, and where: "NiSO₄·7H₂O at 18 degC: 40 kg would crystallise".
[[nodiscard]] std::vector<std::string> crystallising(const bath::Tank& tank,
                                                     const std::vector<bath::Headroom>& headroom,
                                                     const Units& units = {});

}  // namespace bathwright::sheets
