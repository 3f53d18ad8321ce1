#include "shops.hpp"

#include <algorithm>
#include <bathwright/dosing/plan.hpp>
#include <bathwright/matter/stock.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <cmath>
#include <random>

#include "../support/built_in_types.hpp"

namespace shops {
namespace {

using namespace bathwright;

struct Levels {
  double sulfate, chloride, boric_acid, pH, volume_L;
};

class World {
 public:
  World(const bath::Tank& tank, const bath::Chemistry& chemistry, int samples, std::uint32_t seed)
      : tank_(tank), chemistry_(chemistry), samples_(samples), random_(seed) {}

  Result<Shop> open() {
    const Levels read{between(255, 285), between(44, 52), between(35, 43), between(3.8, 4.6),
                      between(2250, 2400)};
    const Levels u{between(1, 4), between(0.3, 1), between(0.3, 1), between(0.02, 0.08), between(10, 60)};
    bath::Tank tank = tank_;
    for (bath::Aim& aim : tank.aims) {
      const double share = between(0.05, 0.5);
      aim.low = aim.aim - share * (aim.aim - aim.low);
      aim.high = aim.aim + between(0.05, 0.5) * (aim.high - aim.aim);
    }
    const auto now = state_of(read);
    if (!now) return now.problems();
    dosing::Spread spread{
        .covariance = dosing::covariance_of(
            chemistry_, *now,
            {{"NiSO4.6H2O", u.sulfate}, {"NiCl2.6H2O", u.chloride}, {"H3BO3", u.boric_acid}}, u.volume_L),
        .u_pH = u.pH,
        .with_constants = false};
    const auto sheet = dosing::plan_additions(tank, chemistry_, *now, {.uncertainty = {}, .most_plans = 1});
    if (!sheet) return sheet.problems();
    const dosing::Plan& plan = sheet->plans.front();
    const auto chances = dosing::chance_of(tank, chemistry_, *now, plan, spread,
                                           {.samples = samples_, .seed = random_(), .threads = 1});
    if (!chances) return chances.problems();
    const auto inside = really_ends_inside(tank, plan, read, u, spread);
    if (!inside) return inside.problems();
    return Shop{chances->in_every_window, *inside};
  }

 private:
  double between(double low, double high) {
    return std::uniform_real_distribution<double>(low, high)(random_);
  }
  double off(double u) { return std::normal_distribution<double>(0, u)(random_); }

  Result<bath::TankState> state_of(const Levels& l) const {
    return chemistry_.state_from(
        {{"NiSO4.6H2O", l.sulfate}, {"NiCl2.6H2O", l.chloride}, {"H3BO3", l.boric_acid}}, l.pH,
        units::Litres{l.volume_L}, tank_.temperature);
  }

  Result<bool> really_ends_inside(const bath::Tank& tank, const dosing::Plan& plan, const Levels& read,
                                  const Levels& u, const dosing::Spread& spread) {
    auto state =
        state_of({read.sulfate + off(u.sulfate), read.chloride + off(u.chloride),
                  read.boric_acid + off(u.boric_acid), read.pH + off(u.pH), read.volume_L + off(u.volume_L)});
    if (!state) return state.problems();
    bath::TankState end = *std::move(state);
    for (const dosing::Addition& addition : plan.additions) {
      matter::StockChemical lot = tank.on_shelf(addition.chemical)->stock;
      if (lot.formula != "H2O") lot.assay *= 1 + off(spread.u_assay_rel);
      const auto brings = chemistry_.brings(lot);
      if (!brings) return brings.problems();
      const double u_kg = lot.liquid ? spread.u_measured_rel : spread.u_weighed_rel;
      end = bath::Chemistry::after(std::move(end), *brings, addition.kg * (1 + off(u_kg)));
    }
    const auto view = chemistry_.quick_view(end);
    if (!view) return view.problems();
    return std::ranges::all_of(tank.aims, [&](const bath::Aim& aim) {
      double found = view->pH;
      for (std::size_t q = 0; q < chemistry_.type().quantities.size(); ++q)
        if (chemistry_.type().quantities[q].id == aim.quantity) found = view->quantity_g_per_L[q];
      return found >= aim.low && found <= aim.high;
    });
  }

  const bath::Tank& tank_;
  const bath::Chemistry& chemistry_;
  int samples_;
  std::mt19937 random_;
};

}  // namespace

std::vector<Shop> open_shops(int count, int samples, std::uint32_t seed, std::string& problem) {
  const auto tank = shopfiles::read_tank(PROJECT_DIR "/baths/n-07.toml", matter::StockCatalogue::built_in());
  const bath::BathType* type = built_in_types().find("watts-nickel");
  if (!tank || !type) return problem = "no tank", std::vector<Shop>{};
  const auto chemistry = bath::Chemistry::prepare(*type, tank->temperature, tank->idle_temperature);
  if (!chemistry) return problem = text(chemistry.problems()), std::vector<Shop>{};
  World world(*tank, *chemistry, samples, seed);
  std::vector<Shop> all;
  for (int i = 0; i < count; ++i) {
    const auto shop = world.open();
    if (!shop) return problem = text(shop.problems()), std::vector<Shop>{};
    all.push_back(*shop);
  }
  return all;
}

std::vector<Row> reliability(const std::vector<Shop>& shops) {
  std::vector<Row> rows(10);
  std::vector<double> variance(10, 0);
  for (const Shop& shop : shops) {
    const auto tenth = std::min<std::size_t>(9, static_cast<std::size_t>(10 * shop.told));
    Row& row = rows[tenth];
    ++row.shops;
    row.told += shop.told;
    row.found += shop.inside;
    variance[tenth] += shop.told * (1 - shop.told);
  }
  for (std::size_t t = 0; t < rows.size(); ++t) {
    Row& row = rows[t];
    if (row.shops == 0) continue;
    row.standard_errors = (row.found - row.told) / std::sqrt(std::max(variance[t], 0.25));
    row.told /= row.shops;
    row.found /= row.shops;
  }
  return rows;
}

}  // namespace shops
