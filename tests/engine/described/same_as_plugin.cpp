// Watts nickel once compiled and once in TOML: nobody must be able to tell which was loaded.
#include <algorithm>
#include <bathwright/bath/chemistry.hpp>
#include <bathwright/described/bath_type_file.hpp>
#include <bit>
#include <catch2/catch.hpp>

#include "../../support/built_in_types.hpp"

using namespace bathwright;

namespace {

const bath::BathType& compiled() {
  const bath::BathType* found = built_in_types().find("watts-nickel");
  REQUIRE(found);
  return *found;
}

const bath::BathType& in_toml() {
  static const auto read = described::read_bath_type_file(TEST_DIR "/watts-nickel.bathtype.toml");
  INFO((read ? "" : text(read.problems())));
  REQUIRE(read);
  return *read;
}

/// The same bits; NaN is NaN.
bool same(double a, double b) { return std::bit_cast<std::uint64_t>(a) == std::bit_cast<std::uint64_t>(b); }

template <class Rows, class Same>
void all_same(const char* table, const Rows& a, const Rows& b, const Same& same_row) {
  INFO(table);
  REQUIRE(a.size() == b.size());
  for (std::size_t i = 0; i < a.size(); ++i) {
    INFO("row " << i + 1);
    CHECK(same_row(a[i], b[i]));
  }
}

}  // namespace

TEST_CASE("Watts nickel in TOML is the same bath type", "[property][described]") {
  const bath::BathType &a = compiled(), &b = in_toml();
  CHECK(std::tie(a.id, a.name, a.version, a.author, a.licence, a.summary, a.validity) ==
        std::tie(b.id, b.name, b.version, b.author, b.licence, b.summary, b.validity));
  CHECK(
      (same(a.min_C, b.min_C) && same(a.max_C, b.max_C) && same(a.max_ionic_strength, b.max_ionic_strength)));
  CHECK((a.convention == b.convention && a.sets.acid == b.sets.acid && a.sets.zinc == b.sets.zinc));
  all_same("sources", a.sources, b.sources, [](const bath::Source& x, const bath::Source& y) {
    return std::tie(x.key, x.citation, x.terms) == std::tie(y.key, y.citation, y.terms);
  });
  all_same("components", a.components, b.components, [](const bath::Component& x, const bath::Component& y) {
    return x.species == y.species && x.found_by == y.found_by;
  });
  all_same("quantities", a.quantities, b.quantities, [](const bath::Quantity& x, const bath::Quantity& y) {
    return x.id == y.id && x.label == y.label && x.formula.text() == y.formula.text() &&
           x.counts == y.counts && x.salt_view == y.salt_view;
  });
  all_same("watched", a.solids, b.solids, [](const bath::WatchedSolid& x, const bath::WatchedSolid& y) {
    return x.name == y.name && x.sign_in_tank == y.sign_in_tank;
  });
  all_same("windows", a.windows, b.windows, [](const bath::Window& x, const bath::Window& y) {
    return x.subject == y.subject && same(x.low, y.low) && same(x.aim, y.aim) && same(x.high, y.high) &&
           same(x.stop_low, y.stop_low) && same(x.stop_high, y.stop_high) && x.source == y.source;
  });
  all_same("additions", a.additions, b.additions,
           [](const bath::AdditionRule& x, const bath::AdditionRule& y) {
             return x.supply == y.supply && x.order == y.order && x.how == y.how && x.source == y.source &&
                    same(x.largest_rise_g_per_L, y.largest_rise_g_per_L) &&
                    same(x.largest_pH_step, y.largest_pH_step) && same(x.wait_h, y.wait_h);
           });
  all_same("cautions", a.cautions, b.cautions, [](const bath::Caution& x, const bath::Caution& y) {
    return x.subject == y.subject && x.text == y.text && x.level == y.level && x.source == y.source;
  });
  all_same("incompatible", a.incompatibilities, b.incompatibilities,
           [](const bath::Incompatible& x, const bath::Incompatible& y) {
             return x.with == y.with && x.why == y.why && x.level == y.level && x.source == y.source;
           });
  all_same("uses", a.uses, b.uses, [](const bath::Use& x, const bath::Use& y) {
    return x.id == y.id && x.label == y.label && x.counted_in == y.counted_in && x.deposits == y.deposits &&
           x.effects.size() == y.effects.size() && same(x.electrons, y.electrons) &&
           same(x.cathode_efficiency, y.cathode_efficiency) && same(x.anode_efficiency, y.anode_efficiency) &&
           x.source == y.source;
  });
  CHECK((a.own_species.empty() && b.own_species.empty() && a.own_solids.empty() && b.own_solids.empty()));
}

TEST_CASE("Watts nickel in TOML gives the same answers, bit for bit", "[property][described]") {
  const auto view_of = [](const bath::BathType& type) {
    const auto chemistry = bath::Chemistry::prepare(type, units::Celsius{55}, units::Celsius{18});
    REQUIRE(chemistry);
    const auto state = chemistry->state_from({{"Ni^2+", 74}, {"Cl^-", 14}, {"H3BO3", 41}, {"Na^+", 2}}, 4.1,
                                             units::Litres{2400}, units::Celsius{55});
    REQUIRE(state);
    auto view = chemistry->view(*state);
    REQUIRE(view);
    return *std::move(view);
  };
  const bath::TankView a = view_of(compiled()), b = view_of(in_toml());
  CHECK((same(a.volume_L, b.volume_L) && same(a.pH, b.pH) && same(a.ionic_strength, b.ionic_strength)));
  CHECK(a.quantity_g_per_L == b.quantity_g_per_L);
  all_same("species", a.species, b.species, [](const bath::SpeciesView& x, const bath::SpeciesView& y) {
    return x.name == y.name && same(x.molality, y.molality) && same(x.log10_activity, y.log10_activity);
  });
  all_same("headroom", a.headroom, b.headroom, [](const bath::Headroom& x, const bath::Headroom& y) {
    return x.solid == y.solid && same(x.working_log10, y.working_log10) && same(x.idle_kg, y.idle_kg);
  });
  REQUIRE(a.indicators.size() == 3);
  all_same("indicators", a.indicators, b.indicators,
           [](const bath::IndicatorValue& x, const bath::IndicatorValue& y) {
             return x.id == y.id && x.unit == y.unit && x.value && y.value && same(*x.value, *y.value);
           });
  CHECK(a.warnings == b.warnings);
}
