// Parts of a page that several sheets share: levels against their windows, headroom of solids, free ions.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/sheets/standing.hpp>
#include <bathwright/sheets/text.hpp>

namespace bathwright::sheets {

/// The tank and its shop left; volume and temperature right.
void tank_title(Lines& lines, const bath::Tank& tank, double volume_L, units::Celsius temperature);

/// To which a level is shown: three figures of its window's upper end, 200.0, 0.100; pH with two decimals.
[[nodiscard]] int decimals_of(const Judged& judged);

[[nodiscard]] Lines levels(const std::vector<Judged>& judged);

/// Room of each watched solid at the working and the idle temperature.
[[nodiscard]] Lines headroom(const bath::Tank& tank, const std::vector<bath::Headroom>& headroom);

/// Species that matter to a level, and the free ions of what is analysed, however little there is of them.
[[nodiscard]] Lines free_ions(const bath::BathType& type, const std::vector<bath::SpeciesView>& species);

/// What would crystallise, and where: "NiSO₄·7H₂O at 18 degC: 40 kg would crystallise".
[[nodiscard]] std::vector<std::string> crystallising(const bath::Tank& tank,
                                                     const std::vector<bath::Headroom>& headroom);

}  // namespace bathwright::sheets
