#include "shop.hpp"

#include <algorithm>
#include <cmath>

namespace simulated_shops {
namespace {

using bathwright::forecast::Policy;
using bathwright::learning::History;

double normal(std::mt19937_64& random) { return std::normal_distribution<double>(0, 1)(random); }
/// Median 1.
double about_one(std::mt19937_64& random, double u) {
  return std::exp(std::sqrt(std::log1p(u * u)) * normal(random));
}
/// Mean 1.
double on_average_one(std::mt19937_64& random, double u) {
  const double s2 = std::log1p(u * u);
  return std::exp(std::sqrt(s2) * normal(random) - s2 / 2);
}

}  // namespace

// Per ampere-hour: Ni 1.0950 g, Cu(II) 1.1855 g, Zn 1.2197 g. Contents of products from molar masses:
// NiSO4.6H2O 262.84 with Ni 58.693; NiCl2.6H2O 237.69 with 2 Cl 70.906; CuSO4.5H2O 249.68 with Cu 63.546;
// ZnO 81.379 with Zn 65.38 takes 2 NaOH 79.994 of what is free, and plating its zinc gives them back; Na2CO3
// 105.99 takes 2 NaOH 79.994; hypophosphite and phosphite per gram of nickel as the electroless bath type
// states them.
const std::vector<Kind>& kinds() {
  static const std::vector<Kind> all = [] {
    std::vector<Kind> k(4);
    Kind& watts = k[0];
    watts.name = "Watts nickel";
    watts.tank_file = "n-07.toml", watts.bath_type = "watts-nickel";
    watts.mark_L = 2400, watts.surface_m2 = 2;
    watts.substances = {{"Ni^2+", 74.9, 0.006, 1}, {"Cl^-", 14.9, 0.010, 5}, {"H3BO3", 42, 0.012, 5}};
    watts.products = {{"nickel-sulfate", {221.07, 0, 0}, 0, 0.5, 0.02},
                      {"nickel-chloride", {243.22, 293.83, 0}, 1, 0.1, 0.02},
                      {"boric-acid", {0, 0, 995}, 2, 0.1, 0.02}};
    watts.work = {{"deposition", {0, 0, 0}, {1.0950, 0, 0}, 0.96, 1.0, 0.02, 0, 0.02, 4000}};
    watts.area_m2_per_shift = 23.5;
    watts.evaporation_L_per_h = 3, watts.idle_evaporation_L_per_h = 0.8;
    watts.water_logged = true;

    Kind& electroless = k[1];
    electroless.name = "electroless nickel";
    electroless.tank_file = "e-02.toml", electroless.bath_type = "electroless-nickel";
    electroless.mark_L = 600, electroless.surface_m2 = 1;
    electroless.substances = {
        {"Ni^2+", 6, 0.008, 1}, {"NaH2PO2.H2O", 30, 0.012, 1}, {"HPO3^2-", 60, 0.02, 5}};
    electroless.products = {{"nickel-sulfate", {221.07, 0, 0}, 0, 0.01, 0, true},
                            {"sodium-hypophosphite", {0, 990, 0}, 1, 0.01, 0, true}};
    electroless.work = {{"deposition", {0, -5.160, 3.669}, {1, 0, 0}, 1, 0, 0, 0.12, 0.05, 900}};
    electroless.area_m2_per_shift = 4.8;
    electroless.evaporation_L_per_h = 6;
    electroless.water_logged = true;
    electroless.dumped_L_per_day = 70;

    Kind& zinc = k[2];
    zinc.name = "alkaline zinc";
    zinc.tank_file = "z-02.toml", zinc.bath_type = "alkaline-zinc";
    zinc.mark_L = 5000, zinc.surface_m2 = 4.5;
    zinc.substances = {{"Zn^2+", 12, 0.008, 1}, {"NaOH", 125, 0.010, 1}, {"Na2CO3", 40, 0.03, 5}};
    zinc.products = {{"zinc-oxide", {799.4, -978.1, 0}, 0, 0.1, 0.02},
                     {"sodium-hydroxide", {0, 985, 0}, 1, 1, 0.02}};
    zinc.work = {{"deposition", {0, 0, 0}, {1.2197, -1.4923, 0}, 0.72, 0, 0.08, 0, 0.02, 8000},
                 {"carbonation", {0, -15.095, 20}, {0, 0, 0}, 1, 0, 0, 1, 0, 0, true}};
    zinc.area_m2_per_shift = 123;
    zinc.evaporation_L_per_h = 1, zinc.idle_evaporation_L_per_h = 0.5;

    Kind& copper = k[3];
    copper.name = "acid copper";
    copper.tank_file = "c-05.toml", copper.bath_type = "acid-copper";
    copper.mark_L = 3200, copper.surface_m2 = 2.6;
    copper.substances = {{"Cu^2+", 53.4, 0.007, 2}, {"H2SO4", 60, 0.010, 2}, {"Cl^-", 0.075, 0.03, 1}};
    copper.products = {{"copper-sulfate", {251.97, 0, 0}, 0, 0.5, 0.02},
                       {"sulfuric-acid", {0, 960, 0}, 1, 0.1, 0.02},
                       {"hydrochloric-acid", {0, 497.6, 359.8}, 2, 0.005, 0.05}};
    // Acid comes for copper that goes, 98.072 g for 63.546 g, and goes with chloride, 49.036 g for 35.453 g.
    copper.work = {
        {"deposition", {0, -0.000415, -0.0003}, {1.1855, -1.8296, 0}, 0.99, 1.0, 0.01, 0.7, 0.02, 6000}};
    copper.area_m2_per_shift = 40;
    copper.evaporation_L_per_h = 2, copper.idle_evaporation_L_per_h = 0.6;
    copper.water_g_per_L = {0, 0, 0.040};
    copper.water_logged = true;
    return k;
  }();
  return all;
}

Policy Kind::policy() const {
  Policy p;
  p.calendar = {2, 8, 5, 0, {}};
  for (const Work& w : work)
    if (!w.by_surface_hour) p.work.push_back({w.use, {w.units_per_shift, 0.1}});
  p.area_m2_per_shift = {area_m2_per_shift, 0.1};
  p.drag_out_L_per_m2 = {film_L_per_m2, u_film};
  p.evaporation_L_per_h = {evaporation_L_per_h, u_evaporation};
  p.idle_evaporation_L_per_h = idle_evaporation_L_per_h;
  for (std::size_t s = 0; s < water_g_per_L.size(); ++s)
    if (water_g_per_L[s] > 0) p.water_g_per_L[substances[s].quantity] = water_g_per_L[s];
  p.u_water_rel = u_water;
  return p;
}

Truth draw_truth(const Kind& kind, std::mt19937_64& random, double wide) {
  const auto factor = [&](double u) { return std::pow(about_one(random, u), wide); };
  Truth t;
  t.drag_out = factor(kind.u_film);
  t.evaporation = factor(kind.u_evaporation);
  t.idle_evaporation = factor(kind.u_evaporation);
  t.water = factor(kind.u_water);
  for (const Work& w : kind.work) {
    double efficiency = w.efficiency;
    if (w.u_efficiency > 0) {
      const double logit = std::log(efficiency / (1 - efficiency)) +
                           wide * w.u_efficiency / (efficiency * (1 - efficiency)) * normal(random);
      efficiency = 1 / (1 + std::exp(-logit));
    }
    t.efficiency.push_back(efficiency);
    t.effects.push_back(factor(w.u_effects));
    t.meter.push_back(factor(w.u_meter));
  }
  return t;
}

Log run_shop(const Kind& kind, const Truth& truth, int weeks, std::mt19937_64& random, Fault fault) {
  const std::size_t n = kind.substances.size();
  Log log;
  log.fault = fault;
  History& h = log.history;
  double volume_L = kind.mark_L;
  std::vector<double> g;
  for (const Substance& s : kind.substances)
    g.push_back(s.start_g_per_L * volume_L * (1 + 0.01 * normal(random)));
  std::vector<double> titrant(n, 1), lot(kind.products.size(), 1), last_found(n, 0);
  const double idle_evaporation = kind.idle_evaporation_L_per_h * truth.idle_evaporation;
  const double fault_from_h =
      (0.3 + 0.4 * std::uniform_real_distribution<double>(0, 1)(random)) * weeks * 168;
  std::int64_t entry = 0;

  const auto titrate = [&](int day, double at_h) {
    bathwright::learning::Analysed a;
    a.when = {at_h, ++entry};
    a.volume_L = volume_L * (1 + 0.004 * normal(random));
    for (std::size_t s = 0; s < n; ++s) {
      const Substance& substance = kind.substances[s];
      const int worked_days = day / 7 * 5 + day % 7;
      if (worked_days % substance.every_days != 0) continue;
      double level = g[s] / volume_L * titrant[s] * (1 + substance.u_titration * normal(random));
      if (fault == Fault::titration_wrong && !log.fault_happened && at_h > fault_from_h && s == 0) {
        level *= 1.12;
        log.fault_happened = true, log.fault_at_h = at_h, log.fault_subject = substance.quantity;
      }
      last_found[s] = level;
      a.levels.push_back({substance.quantity, level, std::hypot(substance.u_titration, 0.003) * level});
    }
    if (!a.levels.empty()) h.analyses.push_back(std::move(a));
  };

  const auto put_in = [&](std::size_t p, double kg, double at_h) {
    const Product& product = kind.products[p];
    bool logged = true, made = true;
    if (!log.fault_happened && at_h > fault_from_h &&
        (fault == Fault::addition_not_logged || fault == Fault::addition_not_made)) {
      (fault == Fault::addition_not_logged ? logged : made) = false;
      log.fault_happened = true, log.fault_at_h = at_h, log.fault_subject = product.stock;
      log.fault_share = kg * product.g_per_kg[product.for_substance] / g[product.for_substance];
    }
    if (logged) h.added.push_back({{at_h, ++entry}, product.stock, kg});
    if (!made) return;
    const double really = kg * lot[p] * (1 + 0.005 * normal(random));
    for (std::size_t s = 0; s < n; ++s) g[s] += really * product.g_per_kg[s];
    volume_L += 0.4 * really;
  };

  // In the morning by what was found last, together with what brings the same (a chloride that brings
  // nickel).
  const auto dose = [&](double at_h) {
    for (std::size_t p = kind.products.size(); p-- > 0;) {
      const Product& product = kind.products[p];
      if (product.every_shift) continue;
      const std::size_t s = product.for_substance;
      const double short_g = (kind.substances[s].start_g_per_L - last_found[s]) * kind.mark_L;
      if (short_g < product.least_share * kind.substances[s].start_g_per_L * kind.mark_L) continue;
      const double kg =
          std::round(short_g / product.g_per_kg[s] / product.weighed_to_kg) * product.weighed_to_kg;
      if (!(kg > 0)) continue;
      put_in(p, kg, at_h);
      for (std::size_t other = 0; other < n; ++other)
        last_found[other] += kg * product.g_per_kg[other] / kind.mark_L;
    }
  };

  std::vector<double> fed_kg(kind.products.size(), 0);
  std::vector<double> units(kind.work.size(), 0);
  double area_m2 = 0, film = 1;
  for (int day = 0; day < 7 * weeks; ++day) {
    const bool works = day % 7 < 5;
    if (day % 21 == 0)
      for (double& t : titrant) t = 1 + 0.003 * normal(random);
    if (day % 30 == 0)
      for (double& l : lot) l = 1 + 0.004 * normal(random);
    for (int hour = 0; hour < 24; ++hour) {
      const double at_h = 24.0 * day + hour;
      const bool at_work = works && hour >= 6 && hour < 22;
      if (works && hour == 6) {
        titrate(day, at_h);
        if (kind.dumped_L_per_day > 0) {
          const double litres = kind.dumped_L_per_day * (1 + 0.02 * normal(random));
          for (double& one : g) one *= 1 - litres / volume_L;
          volume_L -= litres;
          h.dumped.push_back({{at_h + 0.2, ++entry}, kind.dumped_L_per_day});
        }
        dose(at_h + 0.5);
      }
      if (works && (hour == 6 || hour == 14)) {
        film = on_average_one(random, 0.25);
        const double litres = std::max(0.0, kind.mark_L - volume_L + 4 * normal(random));
        for (std::size_t s = 0; s < kind.water_g_per_L.size(); ++s)
          g[s] += litres * kind.water_g_per_L[s] * truth.water;
        volume_L += litres;
        if (kind.water_logged)
          h.watered.push_back({{at_h + 0.7, ++entry}, litres * (1 + 0.01 * normal(random))});
      }
      // The hour: load that comes and goes, breaks and rush.
      const double rush = at_work ? (std::uniform_real_distribution<double>(0, 1)(random) < 0.12
                                         ? 0.1
                                         : 1.105 * on_average_one(random, 0.3))
                                  : 0;
      double litres_out = 0;
      for (std::size_t w = 0; w < kind.work.size(); ++w) {
        const Work& work = kind.work[w];
        const double amount = work.by_surface_hour ? kind.surface_m2 : rush * work.units_per_shift / 8;
        units[w] += amount;
        for (std::size_t s = 0; s < n; ++s)
          g[s] += amount * (work.effects_g[s] * truth.effects[w] +
                            work.plated_g[s] * (work.given_back - truth.efficiency[w]));
      }
      if (at_work) {
        const double area = rush * kind.area_m2_per_shift / 8 * on_average_one(random, 0.15);
        area_m2 += area;
        litres_out = area * kind.film_L_per_m2 * truth.drag_out * film;
        for (double& one : g) one *= 1 - litres_out / volume_L;
      }
      volume_L -= litres_out + (at_work ? kind.evaporation_L_per_h * truth.evaporation : idle_evaporation);
      // Feeds that run while it works, by what the operator reads every hour.
      for (std::size_t p = 0; at_work && p < kind.products.size(); ++p) {
        const Product& product = kind.products[p];
        if (!product.every_shift) continue;
        const std::size_t s = product.for_substance;
        const double short_g =
            kind.substances[s].start_g_per_L * kind.mark_L - g[s] * (1 + 0.01 * normal(random));
        const double kg = std::max(0.0, short_g / product.g_per_kg[s]);
        for (std::size_t q = 0; q < n; ++q) g[q] += kg * product.g_per_kg[q];
        volume_L += 0.4 * kg;
        fed_kg[p] += kg;
      }
      if (works && (hour == 13 || hour == 21)) {
        const double end_h = at_h + 1;
        for (std::size_t w = 0; w < kind.work.size(); ++w) {
          if (kind.work[w].by_surface_hour) continue;
          double meter = truth.meter[w];
          if (fault == Fault::meter_changes && w == 0 && end_h > fault_from_h) {
            meter *= 1.4;
            if (!log.fault_happened) log.fault_at_h = end_h;
            log.fault_happened = true;
          }
          h.worked.push_back({{end_h, ++entry}, kind.work[w].use, units[w] / meter});
          units[w] = 0;
        }
        h.treated.push_back({{end_h, ++entry}, area_m2 * (1 + 0.05 * normal(random))});
        area_m2 = 0;
        for (std::size_t p = 0; p < fed_kg.size(); ++p)
          if (kind.products[p].every_shift && fed_kg[p] > 0) {
            double logged_kg = fed_kg[p] * (1 + 0.005 * normal(random));
            fed_kg[p] = 0;
            if (!log.fault_happened && end_h > fault_from_h && p == 0 &&
                (fault == Fault::addition_not_logged || fault == Fault::addition_not_made)) {
              log.fault_happened = true, log.fault_at_h = end_h, log.fault_subject = kind.products[p].stock;
              log.fault_share = logged_kg * kind.products[p].g_per_kg[0] / g[0];
              if (fault == Fault::addition_not_logged) continue;
              logged_kg *= 2;  // logged twice
            }
            h.added.push_back({{end_h, ++entry}, kind.products[p].stock, logged_kg});
          }
      }
    }
  }
  std::ranges::stable_sort(h.added, {}, [](const auto& a) { return a.when.at_h; });
  return log;
}

}  // namespace simulated_shops
