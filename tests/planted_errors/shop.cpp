#include "shop.hpp"

#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/analysis/titration.hpp>
#include <bathwright/book/book.hpp>
#include <bathwright/described/bath_type_file.hpp>
#include <bathwright/forecast/compiled.hpp>
#include <bathwright/plugin_host/registry.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <cmath>
#include <cstdlib>
#include <iostream>
#include <map>
#include <random>

#include "explanations.hpp"
#include "findings.hpp"
#include "reconcile.hpp"
#include "uncertainty_terms.hpp"

namespace planted_errors {
namespace {

using namespace bathwright;

template <class T>
T must(Result<T> result) {
  if (!result) {
    std::cerr << text(result.problems()) << '\n';
    std::abort();
  }
  return std::move(result).value();
}

const plugin_host::BathTypes& bath_types() {
  static const auto types = [] {
    plugin_host::Places places = plugin_host::built_in_places();
    places.cache = TEST_CACHE;
    places.read_data_file = described::read_bath_type_file;
    return plugin_host::BathTypes::discover(places);
  }();
  return types;
}

/// What a shift does to the tank and what its people write down.
struct Shift {
  bath::TankState tank;  ///< as it is
  std::vector<book::Movement> log;
  std::vector<double>
      noise;  ///< normal: sample, level, planted addition, two of each titration; uniform: which, which way
  double below_mark_L = 0;
};

class Simulation {
 public:
  Simulation(const Shop& shop, unsigned seed)
      : shop_(shop),
        random_(seed),
        tank_(must(shopfiles::read_tank(PROJECT_DIR "/baths/" + shop.tank_file,
                                        matter::StockCatalogue::built_in()))),
        chemistry_(must(bath::Chemistry::prepare(*bath_types().find(tank_.bath_type), tank_.temperature,
                                                 tank_.idle_temperature))),
        work_(must(forecast::compile(tank_, chemistry_, policy_))) {
    std::map<std::string, double> aims;
    for (const bath::Aim& aim : tank_.aims)
      if (aim.quantity != "pH") aims[aim.quantity] = aim.aim;
    truth_ = aim_ = must(chemistry_.state_from(aims, pH(), tank_.working_volume, tank_.temperature));
    // The tank file states the mark to a per cent; this tank's is off by so much, always.
    mark_is_off_ = 0.005 * normal();
  }

  std::vector<Count> run(const std::vector<Planted>& planted, int shifts) {
    std::vector<Count> counts;
    for (const Planted& p : planted) counts.push_back({p});
    book::Start start = made_up();
    for (int shift = 0; shift < shifts; ++shift) {
      const Shift today = next_shift();
      const Met as_it_should_be{today, readings(today, today.tank), {}, {}};
      const auto sound = analysed(start, as_it_should_be);
      for (Count& count : counts) {
        const bool nothing_wrong = count.planted.error == Error::none;
        const auto met = nothing_wrong ? std::optional(as_it_should_be) : with(count.planted, today);
        if (!met) continue;
        const auto result = nothing_wrong ? sound : analysed(start, *met);
        if (!result) continue;  // refused: no figure came of it
        ++count.shifts;
        judge(count, *met, result->misfit);
      }
      start = start_of(*sound, shift);
    }
    return counts;
  }

 private:
  /// A shift with an error in it, and what should be named.
  struct Met {
    Shift shift;
    analysis::Readings readings;
    std::vector<analysis::Mistake> mistakes;  ///< any of these is right
    std::string culprit;
  };

  /// What evaluate() makes of lab and book, without the equilibria that it solves besides: they take most of
  /// its time.
  struct Analysed {
    analysis::Gathered gathered;
    analysis::Weighed weighed;
    analysis::Misfit misfit;
  };

  double normal() { return normal_(random_); }
  double uniform(double low, double high) { return low + (high - low) * uniform_(random_); }

  std::optional<double> pH() const { return shop_.pH > 0 ? std::optional(shop_.pH) : std::nullopt; }

  /// A tank made up to its aims, to a per cent.
  book::Start made_up() const {
    const std::size_t n = truth_.component_mol.size();
    book::Start start{truth_, std::vector<double>(n * n, 0), {}, "make-up", 0};
    for (std::size_t i = 0; i < n; ++i)
      start.covariance[i * n + i] = std::pow(0.01 * truth_.component_mol[i], 2);
    return start;
  }

  book::Start start_of(const Analysed& a, int shift) const {
    const Eigen::Index n = a.weighed.state.size() - 1;
    const Eigen::VectorXd mol = a.gathered.whole * a.weighed.state.head(n) + a.gathered.rest;
    book::Start start{truth_, analysis::covariance_of(a.gathered, a.weighed), {}, "last analysis", shift};
    start.state.component_mol.assign(mol.begin(), mol.end());
    fill_to(start.state, a.weighed.state(n));
    return start;
  }

  void put(bath::TankState& state, const std::vector<double>& mol, double times) const {
    for (std::size_t i = 0; i < mol.size(); ++i) state.component_mol[i] += times * mol[i];
  }

  void fill_to(bath::TankState& state, double L) const {
    for (int step = 0; step < 8; ++step) state.water_kg += L - chemistry_.volume_L(state);
  }

  /// The component a chemical is added for: the one it raises most, of what the tank should hold. Nothing
  /// where it only moves the pH.
  std::optional<std::size_t> added_for(const bath::Brings& brings) const {
    std::optional<std::size_t> most;
    double largest = 0;
    for (std::size_t i = chemistry_.type().acid_by_pH() ? 1 : 0; i < brings.component_mol.size(); ++i) {
      if (i == chemistry_.found_by_charge() || aim_.component_mol[i] == 0) continue;
      const double rise = brings.component_mol[i] / aim_.component_mol[i];
      if (rise <= largest) continue;
      largest = rise;
      most = i;
    }
    return most;
  }

  /// What a kg brings, worked out once: finding the species that make up a formula takes its time.
  const bath::Brings& brings_of(const bath::ShelfItem& item) const {
    auto known = brings_.find(item.stock.id);
    if (known == brings_.end())
      known = brings_.emplace(item.stock.id, must(chemistry_.brings(item.stock))).first;
    return known->second;
  }

  /// kg of a chemical that raises what it is added for by this share of what the tank should hold.
  double kg_for(const bath::ShelfItem& item, double share) const {
    const auto brings = brings_of(item);
    const auto what = added_for(brings);
    return what ? share * aim_.component_mol[*what] / brings.component_mol[*what] : 0;
  }

  /// Chemicals that bring what somebody titrates, acids and alkalis for the pH apart.
  std::vector<const bath::ShelfItem*> feeds() const {
    std::vector<const bath::ShelfItem*> all;
    for (const bath::ShelfItem& item : tank_.shelf) {
      const auto brings = brings_of(item);
      const auto what = added_for(brings);
      if (!what || (chemistry_.type().acid_by_pH() && brings.component_mol[0] != 0)) continue;
      const std::string& species = chemistry_.components()[*what];
      if (std::ranges::any_of(shop_.titrations, [&](const Shop::Bench& bench) {
            return chemistry_.type().quantity(bench.quantity)->counts.contains(species);
          }))
        all.push_back(&item);
    }
    return all;
  }

  Shift next_shift() {
    Shift shift;
    // Work: drag-out near a sixth of a per cent a shift, every component astray by a fifth.
    const double dragged_out = 0.0017 * std::exp(0.3 * normal());
    for (std::size_t i = 0; i < truth_.component_mol.size(); ++i) {
      truth_.component_mol[i] *= 1 - dragged_out;
      if (i == chemistry_.found_by_charge()) continue;
      // What stands above its aim is lost a little faster: nobody lets a by-product grow for ever.
      const double excess =
          aim_.component_mol[i] == 0 ? 0 : truth_.component_mol[i] / aim_.component_mol[i] - 1;
      truth_.component_mol[i] *= 1 + 0.002 * normal() - 0.1 * std::clamp(excess, 0.0, 0.04);
    }
    for (const forecast::CompiledUse& use : work_.uses) {
      if (use.use->id != shop_.work) continue;
      const auto or_else = [](double u, double otherwise) { return std::isnan(u) ? otherwise : u; };
      const double effects = 1 + or_else(use.use->effects_u_rel, 0.03) * std::clamp(normal(), -1.5, 1.5);
      const double efficiency = 1 + or_else(use.use->u_cathode_efficiency, 0.02) * normal();
      put(truth_, forecast::per_unit(use, effects, efficiency).component_mol,
          shop_.Ah * (1 + 0.01 * normal()));
      shift.log.push_back({book::Worked{shop_.work, shop_.Ah}, "work", 900});
    }
    // What ran low is made up: weighed to half a per cent, a lot's assay as good.
    int entry = 1000;
    for (const bath::ShelfItem* item : feeds()) {
      const auto brings = brings_of(*item);
      const std::size_t what = *added_for(brings);
      const double lack = 1 - truth_.component_mol[what] / aim_.component_mol[what];
      if (lack < 0.01) continue;
      const double kg = kg_for(*item, lack);
      shift.log.push_back({book::Addition{item->stock.id, kg}, item->stock.id, ++entry});
      put(truth_, brings.component_mol, kg * (1 + 0.007 * normal()));
    }
    // Sulfate, sodium and the like follow the charges.
    balance(truth_);
    shift.below_mark_L = uniform(0, 0.03) * tank_.working_volume.v;
    fill_to(truth_, tank_.working_volume.v * (1 + mark_is_off_) - shift.below_mark_L);
    shift.tank = truth_;
    for (std::size_t k = 0; k < 2 * shop_.titrations.size() + 3; ++k) shift.noise.push_back(normal());
    shift.noise.push_back(uniform(0, 1));
    shift.noise.push_back(uniform(0, 1));
    return shift;
  }

  /// The counter-ion closes the charges.
  void balance(bath::TankState& state) const {
    double charge = 0;
    const auto& species = chemistry_.working().system().species();
    for (std::size_t i = 0; i < state.component_mol.size(); ++i) {
      if (i == chemistry_.found_by_charge()) continue;
      charge += species[i].charge * state.component_mol[i];
    }
    state.component_mol[chemistry_.found_by_charge()] =
        -charge / species[chemistry_.found_by_charge()].charge;
  }

  /// What the lab and the dipstick show of a tank.
  analysis::Readings readings(const Shift& shift, const bath::TankState& tank) const {
    analysis::Readings read;
    read.file = "simulated";
    read.temperature = tank_.temperature;
    read.pH = pH();
    const double sampling = 0.005 * shift.noise[0];
    for (std::size_t k = 0; k < shop_.titrations.size(); ++k) {
      const Shop::Bench& bench = shop_.titrations[k];
      const bath::Quantity& quantity = *chemistry_.type().quantity(bench.quantity);
      analysis::Titration titration;
      titration.quantity = bench.quantity;
      titration.method = bench.method;
      titration.sample = {bench.sample_mL / 1000};
      titration.titrant = {bench.titrant_mol_per_L};
      titration.burette = {0.01};
      titration.where = "simulated";
      const analysis::Method& method = *analysis::method(bench.method);
      const auto at_10_mL = must(analysis::work_out(
          titration, method,
          *analysis::quantity_per_analyte(method, quantity) * quantity.formula.molar_mass()));
      const double level = chemistry_.quantity_g_per_L(quantity, tank);
      // The terms that work_out states, of the reading that comes out.
      titration.burette = {0.01 * level / at_10_mL.value.v};
      const auto there = analysis::work_out(
          titration, method,
          *analysis::quantity_per_analyte(method, quantity) * quantity.formula.molar_mass());
      // No burette holds it: the lab will be refused.
      const auto& budget = there ? there->budget : at_10_mL.budget;
      const double rel = sampling +
                         std::hypot(budget.sample_rel, budget.titrant_rel) * shift.noise[2 * k + 3] +
                         budget.reading_rel * shift.noise[2 * k + 4];
      titration.burette.v *= 1 + rel;
      read.titrations.push_back(titration);
    }
    const double level_u_dm = 0.05;  // what uncertainty_terms.csv gives a level
    read.level_below_mark =
        units::Decimetres{shift.below_mark_L / tank_.surface->v + level_u_dm * shift.noise[1]};
    return read;
  }

  std::optional<Met> with(const Planted& planted, const Shift& today) {
    Met met{today, {}, {}, {}};
    const std::size_t pick = static_cast<std::size_t>(today.noise[today.noise.size() - 2] * 1e6);
    const bool other_way = today.noise.back() < 0.5;
    const auto feed_list = feeds();
    const bath::ShelfItem& feed = *feed_list[pick % feed_list.size()];
    bath::TankState tank = today.tank;
    const double volume_L = chemistry_.volume_L(tank);
    using analysis::Mistake;
    const auto addition = [&](const bath::ShelfItem& item, double logged, double made) {
      const double kg = kg_for(item, planted.size);
      const auto brings = brings_of(item);
      put(tank, brings.component_mol, made * kg * (1 + 0.007 * today.noise[2]));
      fill_to(tank, volume_L);
      if (logged > 0)
        met.shift.log.push_back({book::Addition{item.stock.id, logged * kg}, item.stock.id, 2000});
      met.culprit = logged > 0 ? "entry 2000" : item.stock.id + " not logged";
    };
    switch (planted.error) {
      case Error::not_logged:
        addition(feed, 0, 1);
        met.mistakes = {Mistake::not_logged};
        break;
      case Error::not_made:
        addition(feed, 1, 0);
        met.mistakes = {Mistake::not_made};
        break;
      case Error::made_twice:
        addition(feed, 1, 2);
        met.mistakes = {Mistake::made_twice};
        break;
      case Error::other_hydrate: {
        const bath::ShelfItem* sulfate = tank_.on_shelf("nickel-sulfate");
        if (!sulfate) return std::nullopt;
        const auto six = must(matter::Formula::parse("NiSO4.6H2O")),
                   seven = must(matter::Formula::parse("NiSO4.7H2O"));
        addition(*sulfate, 1, six.molar_mass().v / seven.molar_mass().v);
        met.mistakes = {Mistake::other_hydrate};
        break;
      }
      default:
        break;
    }
    met.shift.tank = tank;
    met.readings = readings(today, tank);
    auto& titrations = met.readings.titrations;
    if (planted.error == Error::twice_the_sample) {
      analysis::Titration& spoiled = titrations[pick % titrations.size()];
      spoiled.burette.v *= other_way ? 2 : 0.5;
      if (spoiled.burette.v > 0.05) spoiled.burette.v /= 4;  // no burette holds it: the other way round
      met.culprit = spoiled.quantity;
      met.mistakes = {Mistake::sample_size};
    } else if (planted.error == Error::swapped_burettes) {
      const std::size_t a = pick % titrations.size(), b = (a + 1) % titrations.size();
      std::swap(titrations[a].burette, titrations[b].burette);
      met.culprit = titrations[std::min(a, b)].quantity + " and " + titrations[std::max(a, b)].quantity;
      met.mistakes = {Mistake::swapped};
    } else if (planted.error == Error::wrong_level) {
      met.readings.level_below_mark->v += planted.size * tank_.working_volume.v / tank_.surface->v;
      met.culprit = "volume";
      met.mistakes = {Mistake::volume};
    }
    return met;
  }

  std::optional<Analysed> analysed(const book::Start& start, const Met& met) const {
    constexpr double hours = 8;
    const std::optional<analysis::Carried> carried =
        book::carry(start, met.shift.log, hours, tank_, chemistry_);
    const auto findings = analysis::findings_of(met.readings, chemistry_.type());
    if (!findings) return std::nullopt;
    const double surface = tank_.surface->v, mark = tank_.working_volume.v;
    const analysis::VolumeRead volume{mark - met.readings.level_below_mark->v * surface,
                                      std::hypot(analysis::uncertainty_term("volume-at-mark") * mark,
                                                 analysis::uncertainty_term("level") * surface)};
    Analysed done;
    done.gathered =
        analysis::gather(findings->all, volume, {}, start.state.component_mol[0], carried, chemistry_);
    done.weighed = analysis::weigh(done.gathered.weighing);
    done.misfit = analysis::tested(done.gathered, done.weighed);
    analysis::explain(done.misfit, {done.gathered, done.weighed, met.readings, tank_, chemistry_, carried});
    return done;
  }

  static void judge(Count& count, const Met& met, const analysis::Misfit& misfit) {
    if (!misfit.alarm) return;
    ++count.flagged;
    if (misfit.explanations.empty()) return;
    const analysis::Explanation& first = misfit.explanations.front();
    const auto same_pair = [&] {  // a pair is a pair whichever is named first
      const auto both = met.culprit.find(" and ");
      return both != std::string::npos &&
             first.culprit == met.culprit.substr(both + 5) + " and " + met.culprit.substr(0, both);
    };
    const bool right = std::ranges::find(met.mistakes, first.mistake) != met.mistakes.end() &&
                       (first.culprit == met.culprit || same_pair());
    count.named_first += right;
    count.clear += misfit.one_is_clear;
    count.clear_and_wrong += misfit.one_is_clear && !right;
  }

  const Shop& shop_;
  std::mt19937_64 random_;
  std::normal_distribution<double> normal_;
  std::uniform_real_distribution<double> uniform_;
  const bath::Tank tank_;
  const bath::Chemistry chemistry_;
  const forecast::Policy policy_{};
  const forecast::Compiled work_;
  bath::TankState truth_, aim_;
  double mark_is_off_ = 0;
  mutable std::map<std::string, bath::Brings> brings_;
};

}  // namespace

const std::vector<Shop>& shops() {
  static const std::vector<Shop> all{
      {"n-07.toml",
       {{"Ni^2+", "edta-nickel", 2, 0.1},
        {"Cl^-", "mohr-chloride", 2, 0.1},
        {"H3BO3", "mannitol-boric-acid", 2, 0.1}},
       "deposition",
       6000,
       4.2},
      {"c-04.toml",
       {{"Cu^+", "iodometric-copper", 5, 0.1},
        {"free NaCN", "silver-free-cyanide", 10, 0.1},
        {"NaOH", "acid-free-hydroxide", 10, 1},
        {"Na2CO3", "barium-carbonate", 10, 1}},
       "deposition",
       2000,
       0},
      {"z-01.toml",
       {{"Zn^2+", "edta-zinc", 2, 0.1},
        {"Cl^-", "mohr-chloride", 1, 0.1},
        {"H3BO3", "mannitol-boric-acid", 2, 0.1}},
       "",
       0,
       5.4},
  };
  return all;
}

std::string_view name(Error error) {
  switch (error) {
    case Error::none:
      return "nothing wrong";
    case Error::twice_the_sample:
      return "one titration, twice or half the sample";
    case Error::swapped_burettes:
      return "two burettes swapped";
    case Error::not_logged:
      return "addition made, not logged";
    case Error::not_made:
      return "addition logged, not made";
    case Error::made_twice:
      return "addition made twice";
    case Error::other_hydrate:
      return "heptahydrate in the bag";
    case Error::wrong_level:
      return "level read too low";
  }
  return "";
}

std::vector<Count> simulate(const Shop& shop, const std::vector<Planted>& planted, int shifts,
                            unsigned seed) {
  return Simulation(shop, seed).run(planted, shifts);
}

}  // namespace planted_errors
