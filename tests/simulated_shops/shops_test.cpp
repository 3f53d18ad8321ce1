// A few of the shops of REPORT.md: the intervals hold the truth about as often as they say.
#include <bathwright/forecast/compiled.hpp>
#include <bathwright/matter/stock.hpp>
#include <catch2/catch.hpp>

#include "bench.hpp"

using namespace simulated_shops;
namespace bath = bathwright::bath;
namespace forecast = bathwright::forecast;

TEST_CASE("the shops' arithmetic, done by hand, agrees with what the bath types count", "[learning]") {
  for (const Kind& kind : kinds()) {
    const Bench bench = bench_of(kind);
    const auto policy = kind.policy();
    const auto compiled = must_have(forecast::compile(bench.tank, bench.chemistry, policy));
    const auto grams = [&](const std::string& id, const forecast::Amounts& amounts) {
      const auto quantity = std::ranges::find(bench.chemistry.type().quantities, id, &bath::Quantity::id);
      REQUIRE(quantity != bench.chemistry.type().quantities.end());
      return bench.chemistry.quantity_mol(*quantity, amounts.component_mol) *
             quantity->formula.molar_mass().v;
    };
    for (const Product& product : kind.products) {
      const auto* stock = bathwright::matter::StockCatalogue::built_in().find(product.stock);
      REQUIRE(stock);
      const auto brings = must_have(bench.chemistry.brings(*stock));
      for (std::size_t s = 0; s < kind.substances.size(); ++s) {
        INFO(kind.name << ": a kg of " << product.stock << " for " << kind.substances[s].quantity);
        CHECK(product.g_per_kg[s] ==
              Approx(grams(kind.substances[s].quantity, brings)).epsilon(0.01).margin(1));
      }
    }
    for (const Work& work : kind.work) {
      const auto use = std::ranges::find_if(
          compiled.uses, [&](const forecast::CompiledUse& one) { return one.use->id == work.use; });
      REQUIRE(use != compiled.uses.end());
      const auto unit = forecast::per_unit(*use, 1, 1);
      for (std::size_t s = 0; s < kind.substances.size(); ++s) {
        INFO(kind.name << ": a unit of " << work.use << " for " << kind.substances[s].quantity);
        const double by_hand = work.effects_g[s] + work.plated_g[s] * (work.given_back - work.efficiency);
        CHECK(by_hand == Approx(grams(kind.substances[s].quantity, unit)).epsilon(0.01).margin(1e-5));
      }
    }
  }
}

TEST_CASE("learning finds a shop's true figures", "[reference][learning]") {
  constexpr int shops = 24, weeks = 26;
  int shown = 0, covered = 0;
  for (const Kind& kind : kinds()) {
    const Bench bench = bench_of(kind);
    const Study s = study(kind, bench, weeks, shops, 11);
    CHECK(s.failed == 0);
    CHECK(s.rms_learned < s.rms_by_policy);
    for (const Row& row : s.rows) {
      INFO(kind.name << ": " << row.label << ", " << row.covered << " of " << row.shops);
      // Of 24 intervals of 90 % fewer than 16 hold the truth once in 2000 times (binomial).
      CHECK(row.covered >= 16);
      CHECK(row.rms < 1.1 * row.rms_prior);
      shown += row.shops, covered += row.covered;
    }
  }
  // All together: 85 to 97 %, what REPORT.md shows with its larger numbers.
  CHECK(covered > 0.85 * shown);
  CHECK(covered < 0.98 * shown);
}

TEST_CASE("a wrong titration is named in almost every log", "[reference][learning]") {
  const Kind& watts = kinds().front();
  const Named n = named(watts, bench_of(watts), 8, 20, 12, Fault::titration_wrong);
  CHECK(n.planted == 20);
  CHECK(n.named >= 18);
}
