#include "sampled_ends.hpp"

#include <atomic>
#include <bathwright/base/normal.hpp>
#include <bathwright/bath/taken_out.hpp>
#include <cmath>
#include <mutex>
#include <thread>

#include "drawn_tank.hpp"
#include "model_doubt.hpp"

namespace bathwright::dosing {
namespace {

using bath::Brings;
using bath::Chemistry;
using bath::Quantity;
using bath::Tank;
using bath::TankState;
using Eigen::Index;
using speciation::Equilibrium;

/// An addition with its doubts.
struct Doubtful {
  Brings brings, brings_less;  ///< per kg, of the lot as stated and of one with 1 % less of its substance
  double kg, u_assay_rel, u_kg_rel;

  [[nodiscard]] TankState stirred_into(TankState state, double assay_rel, double kg_rel) const {
    const double added = kg * (1 + kg_rel), lower = -100 * assay_rel;
    state = Chemistry::after(std::move(state), brings, added * (1 - lower));
    return Chemistry::after(std::move(state), brings_less, added * lower);
  }
};

Result<std::vector<Doubtful>> doubtful_additions(const Tank& tank, const Chemistry& chemistry,
                                                 const Plan& plan, const Spread& spread) {
  std::vector<Doubtful> all;
  for (const Addition& addition : plan.additions) {
    const bath::ShelfItem* item = tank.on_shelf(addition.chemical);
    if (!item) return Problem{Fault::bad_input, addition.chemical, "is added but not on the shelf", "", ""};
    matter::StockChemical less = item->stock;
    less.assay *= 0.99;
    auto brings = chemistry.brings(item->stock), brings_less = chemistry.brings(less);
    if (!brings) return brings.problems();
    if (!brings_less) return brings_less.problems();
    const bool water = item->stock.formula == "H2O";
    all.push_back({*std::move(brings), *std::move(brings_less), addition.kg,
                   water ? 0 : item->u_assay_rel.value_or(spread.u_assay_rel),
                   item->stock.liquid ? spread.u_measured_rel : spread.u_weighed_rel});
  }
  return all;
}

class Sampler {
 public:
  static Result<Sampler> prepare(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                                 const Plan& plan, const Spread& spread, const Sampling& sampling);
  Result<SampledEnds> run(const std::function<bool(double)>& progress);

 private:
  Sampler(const Tank& tank, const Chemistry& chemistry, const Plan& plan, const Spread& spread,
          const Sampling& sampling, TankDraw draw)
      : tank_(tank),
        chemistry_(chemistry),
        plan_(plan),
        spread_(spread),
        sampling_(sampling),
        draw_(std::move(draw)) {}
  [[nodiscard]] Outcome watch_solids();
  [[nodiscard]] Outcome block(std::size_t first, std::size_t count);
  /// What lies in the past of a sample's end beside the tank: additions as they were really made.
  [[nodiscard]] TankState dosed(const TankState& state, Normal& normal) const;

  const Tank& tank_;
  const Chemistry& chemistry_;
  const Plan& plan_;
  const Spread& spread_;
  const Sampling& sampling_;
  TankDraw draw_;
  std::vector<Doubtful> additions_;
  std::vector<const Quantity*> quantities_;  ///< per aim; nullptr: pH
  TankState end_;                            ///< as planned
  std::vector<std::size_t> watched_;         ///< of the ends' solids: positions in the system
  Eigen::MatrixXd model_doubt_;              ///< root of its covariance
  SampledEnds ends_;
};

Result<Sampler> Sampler::prepare(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                                 const Plan& plan, const Spread& spread, const Sampling& sampling) {
  if (sampling.samples < 1)
    return Problem{Fault::bad_input, "samples", std::to_string(sampling.samples), "1 or more", ""};
  auto draw = TankDraw::prepare(chemistry, now, spread);
  if (!draw) return draw.problems();
  Sampler s(tank, chemistry, plan, spread, sampling, *std::move(draw));
  auto additions = doubtful_additions(tank, chemistry, plan, spread);
  if (!additions) return additions.problems();
  s.additions_ = *std::move(additions);
  for (const bath::Aim& aim : tank.aims) {
    s.quantities_.push_back(chemistry.type().quantity(aim.quantity));
    if (!s.quantities_.back() && aim.quantity != "pH")
      return Problem{Fault::bad_input, tank.file,
                     aim.quantity + " is not a quantity of " + chemistry.type().name, "", ""};
  }
  const double kept_share = 1 - plan.decant_L / chemistry.volume_L(now);
  s.end_ = bath::without(now, 1 - kept_share);
  for (const Doubtful& addition : s.additions_) s.end_ = addition.stirred_into(std::move(s.end_), 0, 0);
  if (Outcome watched = s.watch_solids(); !watched) return watched.problems();
  if (spread.with_constants) {
    const auto shifts = model_doubt(chemistry, now, kept_share, s.end_, s.watched_);
    if (!shifts) return shifts.problems();
    s.model_doubt_ = root_of(*shifts * shifts->transpose());
  }
  return s;
}

Outcome Sampler::watch_solids() {
  const auto view = chemistry_.quick_view(end_);
  if (!view) return view.problems();
  for (const bath::Headroom& room : view->headroom) {
    if (room.slow) continue;
    ends_.solids.push_back({room.solid, room.covers_working, room.covers_idle, {}, {}});
    watched_.push_back(*chemistry_.working().system().solid(room.solid));
  }
  return Done{};
}

TankState Sampler::dosed(const TankState& state, Normal& normal) const {
  const double taken_L = plan_.decant_L * (1 + spread_.u_measured_rel * normal());
  TankState end = bath::without(state, std::min(1.0, taken_L / chemistry_.volume_L(state)));
  for (const Doubtful& addition : additions_) {
    const double assay = addition.u_assay_rel * normal(), kg = addition.u_kg_rel * normal();
    end = addition.stirred_into(std::move(end), assay, kg);
  }
  return end;
}

Outcome Sampler::block(std::size_t first, std::size_t count) {
  std::vector<Normal> normals;
  std::vector<DrawnTank> tanks;
  for (std::size_t i = first; i < first + count; ++i) {
    Normal& normal = normals.emplace_back(sampling_.seed * 0x9E3779B97F4A7C15u + i);
    auto drawn = draw_.draw(normal);
    if (!drawn)
      return Problem{Fault::bad_input, tank_.name,
                     "with the uncertainties stated hardly any tank is possible", "",
                     "Repeat the least certain analysis."};
    tanks.push_back(*std::move(drawn));
  }
  if (Outcome found = draw_.with_acid(tanks); !found) return found;

  std::vector<speciation::Variant> variants;
  std::vector<Eigen::VectorXd> doubt;
  for (std::size_t i = 0; i < count; ++i) {
    const TankState end = dosed(tanks[i].state, normals[i]);
    const double volume = chemistry_.volume_L(end);
    for (std::size_t a = 0; a < quantities_.size(); ++a)
      if (quantities_[a])
        ends_.level[a][first + i] = chemistry_.quantity_mol(*quantities_[a], end.component_mol) *
                                    quantities_[a]->formula.molar_mass().v / volume;
    doubt.emplace_back(model_doubt_ * deviates(normals[i], model_doubt_.cols()));
    speciation::Variant variant{end.component_mol, {}};
    for (double& mol : variant.component_mol) mol *= end_.water_kg / end.water_kg;
    variants.push_back(std::move(variant));
  }

  const auto solve_all = [&](const speciation::Solver& solver, auto&& note) -> Outcome {
    for (speciation::Variant& variant : variants) variant.ln_K = solver.ln_K();
    speciation::Session session(solver);
    return session.solve_variants(
        bath::task_of(end_), variants, [&](std::size_t v, const Outcome& solved, const Equilibrium& answer) {
          if (!solved) tanks[v].possible = false;
          if (tanks[v].possible)
            note(v, answer, [&](Index row) { return doubt[v].size() > 0 ? doubt[v](row) : 0; });
        });
  };
  const auto solids = static_cast<Index>(watched_.size());
  const auto working = [&](std::size_t v, const Equilibrium& answer, const auto& moved) {
    for (std::size_t a = 0; a < quantities_.size(); ++a)
      if (!quantities_[a]) ends_.level[a][first + v] = answer.pH() + moved(0);
    for (Index s = 0; s < solids; ++s) {
      const auto at = static_cast<std::size_t>(s);
      ends_.solids[at].working_log10[first + v] = -answer.saturation_index[watched_[at]] - moved(1 + s);
    }
  };
  const auto idle = [&](std::size_t v, const Equilibrium& answer, const auto& moved) {
    for (Index s = 0; s < solids; ++s) {
      const auto at = static_cast<std::size_t>(s);
      ends_.solids[at].idle_log10[first + v] = -answer.saturation_index[watched_[at]] - moved(1 + solids + s);
    }
  };
  if (Outcome solved = solve_all(chemistry_.working(), working); !solved) return solved;
  if (Outcome solved = solve_all(chemistry_.idle(), idle); !solved) return solved;
  for (std::size_t i = 0; i < count; ++i)
    if (!tanks[i].possible)
      for (std::vector<double>& level : ends_.level) level[first + i] = bath::not_given;
  return Done{};
}

Result<SampledEnds> Sampler::run(const std::function<bool(double)>& progress) {
  const auto count = static_cast<std::size_t>(sampling_.samples);
  ends_.level.assign(quantities_.size(), std::vector<double>(count, bath::not_given));
  for (SampledEnds::Solid& solid : ends_.solids) {
    solid.working_log10.assign(count, bath::not_given);
    solid.idle_log10.assign(count, bath::not_given);
  }
  // Blocks of one size, since samples solved side by side share their rounding.
  constexpr std::size_t block_size = 128;
  const std::size_t blocks = (count + block_size - 1) / block_size;
  std::vector<Problems> failed(blocks);
  std::atomic<std::size_t> next{0}, done{0};
  std::atomic<bool> stopped{false};
  std::mutex telling;
  const auto work = [&] {
    for (std::size_t b; !stopped && (b = next++) < blocks;) {
      const std::size_t first = b * block_size;
      if (Outcome sampled = block(first, std::min(block_size, count - first)); !sampled)
        failed[b] = sampled.problems();
      ++done;
      if (!progress) continue;
      const std::scoped_lock lock(telling);
      if (!progress(static_cast<double>(done) / static_cast<double>(blocks))) stopped = true;
    }
  };
  {
    std::vector<std::jthread> others;
    for (unsigned t = 1; t < sampling_.threads; ++t) others.emplace_back(work);
    work();
  }
  if (stopped) return Problem{Fault::refused, "chance", "stopped before it was done", "", ""};
  for (const Problems& problems : failed)
    if (!problems.empty()) return problems;
  for (std::size_t i = 0; i < count && !ends_.level.empty(); ++i)
    ends_.unsolved += std::isnan(ends_.level.front()[i]);
  return std::move(ends_);
}

}  // namespace

Result<SampledEnds> sampled_ends(const Tank& tank, const Chemistry& chemistry, const TankState& now,
                                 const Plan& plan, const Spread& spread, const Sampling& sampling,
                                 const std::function<bool(double)>& progress) {
  auto sampler = Sampler::prepare(tank, chemistry, now, plan, spread, sampling);
  if (!sampler) return sampler.problems();
  return (*std::move(sampler)).run(progress);
}

}  // namespace bathwright::dosing
