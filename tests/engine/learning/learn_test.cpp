// Learning against histories whose answer is known by hand.
#include <bathwright/learning/learn.hpp>
#include <catch2/catch.hpp>
#include <cmath>

using namespace bathwright;
using bath::FoundBy;
using learning::History;
using learning::SuspectKind;
using learning::What;

namespace {

template <class T>
T must(Result<T> result) {
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return std::move(result).value();
}

bath::Quantity quantity(const char* id, const char* formula, speciation::Composition counts) {
  return {id, id, must(matter::Formula::parse(formula)), std::move(counts)};
}

/// Sulfuric acid in which aluminium dissolves by the ampere-hour; acid titrated, sulfate by charge.
bath::BathType anodizing() {
  bath::BathType type;
  type.id = type.name = "anodizing";
  type.components = {{"H^+", FoundBy::analysis}, {"Al^3+", FoundBy::analysis}, {"SO4^2-", FoundBy::charge}};
  type.quantities = {quantity("Al^3+", "Al^3+", {{"Al^3+", 1}}), quantity("H2SO4", "H2SO4", {{"H^+", 0.5}})};
  bath::Use use;
  use.id = use.label = "anodizing";
  use.counted_in = bath::CountedIn::ampere_hour;
  use.effects = {{"Al^3+", 0.1}};
  use.effects_u_rel = 0.2;
  type.uses = {use};
  return type;
}

/// 1000 L that work day and night in one shift of 24 h; 1000 Ah and 100 m2 a day, a film of 0.1 L/m2.
struct Shop {
  bath::BathType type = anodizing();
  bath::Chemistry chemistry = must(bath::Chemistry::prepare(type, {25}, {25}));
  bath::Tank tank;
  forecast::Policy policy;

  Shop() {
    tank.name = "test tank";
    tank.working_volume = {1000};
    tank.freeboard = {50};
    tank.temperature = tank.idle_temperature = {25};
    bath::ShelfItem acid;
    acid.stock = *matter::StockCatalogue::built_in().find("sulfuric-acid");
    tank.shelf = {acid};
    policy.work = {{"anodizing", {1000, 0.1}}};
    policy.area_m2_per_shift = {100, 0.1};
    policy.drag_out_L_per_m2 = {0.1, 0.4};
  }

  /// Daily analyses without error of what dg/dt = p - D/V g makes; `film` L/m2, `al` g/Ah.
  ///   Acid: 3/2 mol H2SO4 per mol Al go, 98.072 * 1.5 / 26.982 g per g.
  [[nodiscard]] History history(int days, double film, double al) const {
    History h;
    const double D = 100 * film, V = 1000, al_in = 1000 * al, acid_in = -al_in * 1.5 * 98.072 / 26.982;
    double g_al = 10'000, g_acid = 180'000;
    for (int day = 0; day <= days; ++day) {
      if (day > 0) {
        const double kept = std::exp(-D / V);
        g_al = al_in * V / D + (g_al - al_in * V / D) * kept;
        g_acid = acid_in * V / D + (g_acid - acid_in * V / D) * kept;
        h.worked.push_back({{24.0 * day, 2 * day}, "anodizing", 1000});
        h.treated.push_back({{24.0 * day, 2 * day}, 100});
      }
      h.analyses.push_back({{24.0 * day, 2 * day + 1},
                            {{"Al^3+", g_al / V, 0.01 * g_al / V}, {"H2SO4", g_acid / V, 0.01 * g_acid / V}},
                            {}});
    }
    return h;
  }
};

const learning::Parameter& of(const learning::Learned& learned, What what) {
  const auto at = std::ranges::find(learned.parameters, what, &learning::Parameter::what);
  REQUIRE(at != learned.parameters.end());
  return *at;
}

}  // namespace

TEST_CASE("a long log without errors is learned whatever the prior", "[reference][learning]") {
  const Shop shop;
  const auto learned =
      must(learning::learn(shop.tank, shop.chemistry, shop.policy, shop.history(120, 0.15, 0.12)));
  const auto &film = of(learned, What::drag_out), &al = of(learned, What::effects),
             &work = of(learned, What::work);
  CHECK(film.unit == "mL/dm2");
  CHECK(film.prior == Approx(1));
  CHECK(film.value == Approx(1.5).epsilon(0.02));
  CHECK(film.told > 0.98);
  // Only the product of meter and effect shows in the bath; the prior of each parts it.
  CHECK(al.value / 0.1 * work.value / 1000 == Approx(1.2).epsilon(0.02));
  CHECK(std::log(work.value / 1000) / std::log(al.value / 0.1) ==
        Approx(std::log1p(0.02 * 0.02) / std::log1p(0.04)).epsilon(0.01));
  CHECK(learned.suspects.empty());
  CHECK(learned.rms_learned < 0.01);
  CHECK(learned.rms_by_policy > 0.1);
}

TEST_CASE("a log that says nothing leaves the prior as it is", "[property][learning]") {
  const Shop shop;
  auto h = shop.history(2, 0.1, 0.1);
  for (auto& analysed : h.analyses)
    for (auto& level : analysed.levels) level.u_g_per_L *= 10;
  const auto learned = must(learning::learn(shop.tank, shop.chemistry, shop.policy, h));
  const auto& film = of(learned, What::drag_out);
  CHECK(film.value == Approx(film.prior).epsilon(0.02));
  CHECK(film.told < 0.02);
  // 90 % of a lognormal with relative standard deviation 0.4.
  const double s = std::sqrt(std::log1p(0.16));
  CHECK(film.prior_p05 == Approx(std::exp(-1.644854 * s)).epsilon(1e-5));
  CHECK(film.prior_p95 == Approx(std::exp(1.644854 * s)).epsilon(1e-5));
}

TEST_CASE("more of a log never says less", "[property][learning]") {
  const Shop shop;
  double before = 0;
  for (const int days : {5, 20, 60, 180}) {
    const auto learned =
        must(learning::learn(shop.tank, shop.chemistry, shop.policy, shop.history(days, 0.1, 0.1)));
    CAPTURE(days);
    CHECK(of(learned, What::drag_out).told > before);
    before = of(learned, What::drag_out).told;
  }
}

TEST_CASE("what does not fit is named", "[unit][learning]") {
  const Shop shop;
  const auto suspects = [&](const History& history) {
    return must(learning::learn(shop.tank, shop.chemistry, shop.policy, history)).suspects;
  };
  SECTION("one wrong level") {
    auto h = shop.history(40, 0.1, 0.1);
    h.analyses[20].levels[0].g_per_L *= 1.15;
    const auto found = suspects(h);
    REQUIRE(found.size() == 1);
    CHECK(found[0].kind == SuspectKind::analysis);
    CHECK(found[0].subject == "Al^3+");
    CHECK(found[0].when.entry == 41);
    CHECK(found[0].amount == Approx(h.analyses[20].levels[0].g_per_L * (1 - 1 / 1.15)).epsilon(0.1));
  }
  SECTION("an addition that was logged and not made") {
    auto h = shop.history(40, 0.1, 0.1);
    h.added.push_back({{24.0 * 20 + 1, 99}, "sulfuric-acid", 20});
    const auto found = suspects(h);
    REQUIRE(found.size() == 1);
    CHECK(found[0].kind == SuspectKind::addition_missing);
    CHECK(found[0].when.entry == 99);
    CHECK(found[0].amount == Approx(-1).margin(0.1));
  }
  SECTION("an addition that was made and not logged") {
    auto h = shop.history(40, 0.1, 0.1);
    for (std::size_t i = 20; i < h.analyses.size(); ++i)  // 20 kg at 96 %, carried out by 1 % a day
      h.analyses[i].levels[1].g_per_L += 20 * 0.96 * std::exp(-0.01 * static_cast<double>(i - 20));
    const auto found = suspects(h);
    REQUIRE(found.size() == 1);
    CHECK(found[0].kind == SuspectKind::addition_extra);
    CHECK(found[0].subject == "sulfuric-acid");
    CHECK(found[0].amount == Approx(20).epsilon(0.1));
    CHECK(found[0].from_h == 24.0 * 19);
    CHECK(found[0].when.at_h == 24.0 * 20);
  }
  SECTION("a fifth of the tank that was lost") {
    auto h = shop.history(40, 0.1, 0.1);
    const auto after = shop.history(40, 0.1, 0.1);
    for (std::size_t i = 20; i < h.analyses.size(); ++i)
      for (std::size_t q = 0; q < 2; ++q)
        h.analyses[i].levels[q].g_per_L -=
            0.2 * after.analyses[20].levels[q].g_per_L * std::exp(-0.01 * static_cast<double>(i - 20));
    const auto found = suspects(h);
    REQUIRE(found.size() == 1);
    CHECK(found[0].kind == SuspectKind::loss);
    CHECK(found[0].subject.empty());
    CHECK(found[0].amount == Approx(200).epsilon(0.1));
  }
  SECTION("a meter that reads less from a day on") {
    auto h = shop.history(120, 0.1, 0.1);
    for (std::size_t i = 60; i < h.worked.size(); ++i) h.worked[i].units *= 0.6;
    const auto found = suspects(h);
    for (const auto& f : found)
      UNSCOPED_INFO(f.subject << ' ' << f.when.at_h / 24 << ' ' << f.misfit << ' ' << f.words);
    const auto change = std::ranges::find(found, SuspectKind::change, &learning::Suspect::kind);
    REQUIRE(change != found.end());
    CHECK(change->subject == "work: anodizing");
    CHECK(change->when.at_h == Approx(24.0 * 60).margin(24 * 7));
    CHECK(change->amount == Approx(1 / 0.6).epsilon(0.15));
  }
  SECTION("a level that rises by what nothing explains") {
    auto h = shop.history(60, 0.1, 0.1);
    for (std::size_t i = 0; i < h.analyses.size(); ++i)
      h.analyses[i].levels[1].g_per_L += 0.5 * static_cast<double>(i);
    const auto found = suspects(h);
    const auto drift = std::ranges::find(found, SuspectKind::drift, &learning::Suspect::kind);
    REQUIRE(drift != found.end());
    CHECK(drift->subject == "H2SO4");
    CHECK(drift->amount > 0);
  }
}

TEST_CASE("what is not logged goes as the policy says, and is said", "[unit][learning]") {
  const Shop shop;
  auto h = shop.history(60, 0.15, 0.1);
  const auto with = must(learning::learn(shop.tank, shop.chemistry, shop.policy, h));
  h.worked.clear();
  h.treated.clear();
  const auto without = must(learning::learn(shop.tank, shop.chemistry, shop.policy, h));
  CHECK(of(without, What::drag_out).value == Approx(1.5).epsilon(0.1));
  CHECK(of(without, What::drag_out).told < of(with, What::drag_out).told);
  CHECK(with.notes.size() + 2 == without.notes.size());
}

TEST_CASE("a history that cannot be used is refused", "[failure][learning]") {
  const Shop shop;
  auto h = shop.history(1, 0.1, 0.1);
  CHECK_FALSE(learning::learn(shop.tank, shop.chemistry, shop.policy, h));  // two analyses
  h = shop.history(10, 0.1, 0.1);
  h.added.push_back({{30, 50}, "sulphuric-acid", 1});
  const auto unknown = learning::learn(shop.tank, shop.chemistry, shop.policy, h);
  REQUIRE_FALSE(unknown);
  CHECK(text(unknown.problems()).find("Did you mean sulfuric-acid") != std::string::npos);
  h.added.clear();
  std::swap(h.analyses[3].when, h.analyses[4].when);
  CHECK_FALSE(learning::learn(shop.tank, shop.chemistry, shop.policy, h));
}
