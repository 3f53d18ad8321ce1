// A Watts nickel bath and tank N-07 of the hand-worked morning analysis, for the tests of this folder.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <catch2/catch.hpp>

namespace watts {

using namespace bathwright;

inline bath::Quantity quantity(const std::string& id, speciation::Composition counts,
                               bool salt_view = false) {
  return {id, id, *matter::Formula::parse(id), std::move(counts), salt_view};
}

inline bath::BathType bath_type() {
  bath::BathType type;
  type.id = "watts-nickel";
  type.name = "Watts nickel";
  type.min_C = 15;
  type.max_C = 70;
  type.convention = activity::Convention::interaction;
  type.components = {{"H^+", bath::FoundBy::pH},        {"Ni^2+", bath::FoundBy::analysis},
                     {"Cl^-", bath::FoundBy::analysis}, {"H3BO3", bath::FoundBy::analysis},
                     {"Na^+", bath::FoundBy::book},     {"SO4^2-", bath::FoundBy::charge}};
  type.quantities = {quantity("Ni^2+", {{"Ni^2+", 1}}),
                     quantity("Cl^-", {{"Cl^-", 1}}),
                     quantity("H3BO3", {{"H3BO3", 1}}),
                     quantity("Na^+", {{"Na^+", 1}}),
                     quantity("SO4^2-", {{"SO4^2-", 1}}),
                     quantity("NiSO4.6H2O", {{"Ni^2+", 1}, {"Cl^-", -0.5}}, true),
                     quantity("NiCl2.6H2O", {{"Cl^-", 0.5}}, true)};
  return type;
}

inline const bath::Chemistry& chemistry() {
  static const bath::Chemistry ready = [] {
    auto prepared = bath::Chemistry::prepare(bath_type(), {54}, {20});
    INFO((prepared ? std::string() : text(prepared.problems())));
    REQUIRE(prepared);
    return *std::move(prepared);
  }();
  return ready;
}

inline bath::Tank tank() {
  bath::Tank tank;
  tank.name = "N-07";
  tank.working_volume = {2400};
  tank.freeboard = {150};
  tank.surface = units::SquareDecimetres{200};
  tank.temperature = {54};
  tank.idle_temperature = {20};
  tank.aims = {{"Ni^2+", 75, 68, 82}, {"Cl^-", 15, 13, 18}, {"H3BO3", 42, 38, 45}, {"pH", 4.0, 3.8, 4.4}};
  return tank;
}

inline analysis::Titration titration(const std::string& quantity, const std::string& method, double sample_mL,
                                     double mol_per_L, double burette_mL) {
  return {quantity, method, {sample_mL / 1000}, {mol_per_L}, 1, {burette_mL / 1000}, {0}, "morning.toml:7"};
}

inline analysis::Titration nickel() { return titration("Ni^2+", "edta-nickel", 2, 0.1012, 23.8); }
inline analysis::Titration chloride() { return titration("Cl^-", "mohr-chloride", 2, 0.0998, 8.1); }
inline analysis::Titration boric_acid() { return titration("H3BO3", "mannitol-boric-acid", 2, 0.1005, 11.9); }

inline analysis::Found found(const std::string& quantity, double g_per_L,
                             std::optional<double> u = std::nullopt) {
  analysis::Found f{quantity, {g_per_L}, std::nullopt, "morning.toml:12"};
  if (u) f.uncertainty = units::Concentration{*u};
  return f;
}

/// The morning's readings: level 3 cm below the mark, three titrations, pH 4.1.
inline analysis::Readings morning() {
  analysis::Readings readings;
  readings.file = "morning.toml";
  readings.level_below_mark = units::Decimetres{0.3};
  readings.temperature = units::Celsius{54};
  readings.pH = 4.1;
  readings.titrations = {nickel(), chloride(), boric_acid()};
  return readings;
}

inline analysis::Analysis evaluated(const analysis::Readings& readings,
                                    const std::optional<analysis::Book>& book = std::nullopt) {
  auto result = analysis::evaluate(readings, tank(), chemistry(), book);
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return *std::move(result);
}

inline const analysis::LevelFound& level(const analysis::Analysis& a, const std::string& quantity) {
  const auto at =
      std::find_if(a.results.begin(), a.results.end(), [&](const auto& r) { return r.quantity == quantity; });
  INFO(quantity);
  REQUIRE(at != a.results.end());
  return *at;
}

/// The only problem an evaluation ends in.
inline Problem refusal(const analysis::Readings& readings, const bath::Tank& in = tank(),
                       const std::optional<analysis::Book>& book = std::nullopt) {
  const auto result = analysis::evaluate(readings, in, chemistry(), book);
  REQUIRE_FALSE(result);
  INFO(text(result.problems()));
  REQUIRE(result.problems().size() == 1);
  return result.problems().front();
}

inline bool says(const std::vector<std::string>& notes, const std::string& piece) {
  return std::any_of(notes.begin(), notes.end(),
                     [&](const auto& n) { return n.find(piece) != std::string::npos; });
}

}  // namespace watts
