#include <fmt/format.h>

#include <algorithm>
#include <bathwright/analysis/analysis.hpp>
#include <bathwright/matter/water.hpp>
#include <bathwright/units/show.hpp>
#include <cassert>
#include <cmath>

#include "explanations.hpp"
#include "findings.hpp"
#include "levels.hpp"
#include "reconcile.hpp"
#include "sanity.hpp"
#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

using units::show;

// One evaluation at work: what is known so far, and every problem met on the way.
class Evaluation {
 public:
  Evaluation(const Readings& readings, const bath::Tank& tank, const bath::Chemistry& chemistry,
             const std::optional<Book>& book, double in_tank_per_in_sample)
      : readings_(readings),
        tank_(tank),
        chemistry_(chemistry),
        type_(chemistry.type()),
        book_(book),
        in_tank_per_in_sample_(in_tank_per_in_sample) {}

  Result<Analysis> run() {
    analysis_.sample_number = readings_.sample_number;
    analysis_.sampled = readings_.sampled;
    analysis_.sampled_by = readings_.sampled_by;
    find_volume();
    find_temperature();
    find_pH();
    if (problems_.empty()) list_expected();
    take_findings();
    if (!problems_.empty()) return problems_;
    list_levels();
    std::ranges::copy(misfits(analysis_, tank_), std::back_inserter(analysis_.suspects));
    close_with_state();
    if (!problems_.empty()) return problems_;
    reconcile();
    if (!problems_.empty()) return problems_;
    compare_what_was_not_used();
    compare_density();
    look_at_end_points();
    return std::move(analysis_);
  }

 private:
  void refuse(std::string field, std::string what, std::string expected, std::string mend) {
    const std::string where = readings_.file.empty() ? std::move(field) : readings_.file + ": " + field;
    problems_.push_back({Fault::bad_input, where, std::move(what), std::move(expected), std::move(mend)});
  }
  void note(std::string text) { analysis_.notes.push_back(std::move(text)); }

  void find_volume();
  void find_temperature();
  void find_pH();
  void take_findings();
  void take_from_book(const bath::Component& component);
  void take_all_that_settle();
  void list_levels();
  void close_with_state();
  [[nodiscard]] std::vector<Finding> read_today() const;
  [[nodiscard]] Gathered gathered(double proton_mol) const;
  void list_expected();
  Weighed weigh_and_test(const Gathered& all);
  void reconcile();
  void take_reconciled(const Gathered& all, const Weighed& weighed);
  void suspect_what_misfits();
  void suspect_a_copy();
  void compare_what_was_not_used();
  void compare_density();
  void look_at_end_points();

  [[nodiscard]] const std::string& counter_ion() const;
  void add_result(const bath::Quantity& quantity);
  void compare_pH();

  const Readings& readings_;
  const bath::Tank& tank_;
  const bath::Chemistry& chemistry_;
  const bath::BathType& type_;
  const std::optional<Book>& book_;
  const double in_tank_per_in_sample_;  ///< level in the hot tank over that in the cooled sample

  Analysis analysis_;
  Problems problems_;
  Levels levels_;
  std::vector<Finding> open_, used_, unused_;
  std::vector<Titration> titrations_;  ///< with the strengths of their titrants
};

// Each way of finding the volume has its uncertainty: the tank's own measure, the level, or that nobody
// looked.
void Evaluation::find_volume() {
  const double mark = tank_.working_volume.v;
  const double u_mark = uncertainty_term("volume-at-mark") * mark;
  if (readings_.volume && readings_.level_below_mark) {
    refuse("volume", "both a volume and a level below the mark are given", "one of them", "Leave one out.");
  } else if (readings_.volume) {
    analysis_.volume = *readings_.volume;
    analysis_.volume_from = "as read";
    analysis_.u_volume_L = uncertainty_term("volume-as-read") * readings_.volume->v;
  } else if (readings_.level_below_mark) {
    if (!tank_.surface) {
      refuse("level_below_mark", tank_.name + " has no surface area to turn a level into a volume", "",
             "Give the volume, or the liquid surface in the tank file.");
      return;
    }
    analysis_.volume = {mark - readings_.level_below_mark->v * tank_.surface->v};  // dm * dm2 = L
    analysis_.volume_from = fmt::format(
        "{:g} L at the mark, {} low on {:g} dm2", mark,
        readings_.written.text("level_below_mark", fmt::format("{:g} dm", readings_.level_below_mark->v)),
        tank_.surface->v);
    analysis_.u_volume_L = std::hypot(u_mark, uncertainty_term("level") * tank_.surface->v);
  } else {
    analysis_.volume = tank_.working_volume;
    analysis_.volume_from = "taken as the working volume";
    analysis_.u_volume_L = std::hypot(u_mark, uncertainty_term("volume-taken") * mark);
    note("no volume or level given: the tank is taken as filled to the mark, " + show(tank_.working_volume));
  }
  if (problems_.empty() && (!(analysis_.volume.v > 0) || !std::isfinite(analysis_.volume.v)))
    refuse(readings_.level_below_mark ? "level_below_mark" : "volume",
           "leaves " + show(analysis_.volume) + " in the tank", "more than 0",
           "Check the figure and its unit.");
}

void Evaluation::find_temperature() {
  analysis_.temperature = readings_.temperature.value_or(tank_.temperature);
  if (!readings_.temperature)
    note("no temperature given: taken as the tank's, " + show(tank_.temperature, "degC", 3));

  constexpr double noticeable = 0.001;
  const auto per_cent = [](double ratio) { return 100 * std::abs(ratio - 1); };
  if (readings_.sample_temperature) {
    if (std::abs(in_tank_per_in_sample_ - 1) > noticeable)
      note(fmt::format("pipetted at {}: levels are {:.1f} % {} in the tank, at {} (density of this bath)",
                       show(*readings_.sample_temperature, "degC", 3), per_cent(in_tank_per_in_sample_),
                       in_tank_per_in_sample_ < 1 ? "lower" : "higher",
                       show(analysis_.temperature, "degC", 3)));
    return;
  }
  constexpr units::Celsius laboratory{20};
  const double expansion = matter::water_density(laboratory) / matter::water_density(analysis_.temperature);
  if (std::abs(expansion - 1) > noticeable) {
    note(
        fmt::format("levels are taken to hold at {}; of a sample that was pipetted at {} they are {:.1f} % "
                    "too {} (expansion of water)",
                    show(analysis_.temperature, "degC", 3), show(laboratory, "degC", 3), per_cent(expansion),
                    expansion > 1 ? "high" : "low"));
  }
}

void Evaluation::find_pH() {
  if (readings_.pH) {
    analysis_.pH = *readings_.pH;
  } else if (type_.acid_by_pH() && book_ && book_->pH) {
    analysis_.pH = *book_->pH;
    note(fmt::format("no pH given: {} taken from {}", units::significant(analysis_.pH), book_->from));
  } else if (type_.acid_by_pH()) {
    refuse("pH", "no pH is given and the book has none", "", "Measure the pH and enter it.");
    return;
  }
  if (!std::isfinite(analysis_.pH))
    refuse("pH", "is not a number", "0 to 14", "Enter the pH as it was read.");
}

const std::string& Evaluation::counter_ion() const {
  const auto found = std::ranges::find(type_.components, bath::FoundBy::charge, &bath::Component::found_by);
  assert(found != type_.components.end());  // Chemistry::prepare asks for one
  return found->species;
}

// Findings that settle a component are taken, again and again, until the rest settles nothing more.
void Evaluation::take_all_that_settle() {
  for (bool progress = true; progress;) {
    progress = false;
    std::erase_if(open_, [&](const Finding& finding) {
      const Levels::Taken taken = levels_.take(finding);
      if (taken == Levels::Taken::leaves_open) return false;
      progress |= taken == Levels::Taken::settles_a_component;
      (taken == Levels::Taken::restates ? unused_ : used_).push_back(finding);
      return true;
    });
  }
}

void Evaluation::take_findings() {
  auto found = findings_of(readings_, type_);
  if (!found) {
    problems_.insert(problems_.end(), found.problems().begin(), found.problems().end());
    return;
  }
  Findings findings = *std::move(found);
  titrations_ = std::move(findings.titrations);
  std::ranges::copy(findings.notes, std::back_inserter(analysis_.notes));
  for (Finding& finding : findings.all) {
    finding.g_per_L *= in_tank_per_in_sample_;
    finding.u_g_per_L *= in_tank_per_in_sample_;
  }
  open_ = united(findings.all, analysis_.suspects);

  // The counter-ion is what electroneutrality leaves; a finding of it can only be compared.
  const std::string& counter = counter_ion();
  const auto counted = std::stable_partition(
      open_.begin(), open_.end(), [&](const Finding& f) { return !f.quantity->counts.contains(counter); });
  unused_.assign(counted, open_.end());
  open_.erase(counted, open_.end());

  // An ion found for itself comes before a salt that restates it.
  std::ranges::stable_sort(open_, {}, [](const Finding& f) {
    return std::pair(f.quantity->counts.size(), f.quantity->salt_view);
  });
  take_all_that_settle();

  // A salt found is about its most counted component (NiSO4.6H2O about Ni^2+): the book completes the others
  // first.
  const auto is_about = [](const Finding& finding, const std::string& species) {
    const auto largest = std::ranges::max_element(finding.quantity->counts, {},
                                                  [](const auto& part) { return std::abs(part.second); });
    return largest->first == species;
  };
  std::vector<bath::Component> missing;
  std::ranges::copy_if(type_.components, std::back_inserter(missing), [](const bath::Component& c) {
    return c.found_by == bath::FoundBy::analysis || c.found_by == bath::FoundBy::book;
  });
  std::ranges::stable_partition(missing, [&](const bath::Component& c) {
    return std::ranges::none_of(open_, [&](const Finding& f) { return is_about(f, c.species); });
  });
  for (const bath::Component& component : missing) {
    if (!levels_.knows(component.species)) take_from_book(component);
    take_all_that_settle();
  }
}

void Evaluation::take_from_book(const bath::Component& component) {
  const auto own_of = [&](std::size_t parts) {
    return std::ranges::find_if(type_.quantities, [&](const bath::Quantity& q) {
      return !q.salt_view && q.counts.size() <= parts && q.counts.contains(component.species);
    });
  };
  auto own = own_of(1);
  if (own == type_.quantities.end()) own = own_of(2);  // free cyanide, for the cyanide
  const bool has_quantity = own != type_.quantities.end();
  const std::string& called = has_quantity ? own->id : component.species;
  if (const auto expected = std::ranges::find(analysis_.expected, called, &LevelFound::quantity);
      has_quantity && expected != analysis_.expected.end()) {
    open_.push_back({&*own, std::max(expected->value.v, 0.0), expected->standard_uncertainty.v, Origin::book,
                     book_->from, book_->from});
    note(fmt::format("{} was not analysed: {} +/- {} by the book", called, show(expected->value),
                     show(expected->standard_uncertainty)));
  } else if (has_quantity && book_ && book_->g_per_L.contains(called)) {
    const double level = book_->g_per_L.at(called);
    if (!(level >= 0) || !std::isfinite(level)) {
      refuse(called, fmt::format("{} has {} g/L", book_->from, units::significant(level)), "0 or more",
             "Analyse it and enter the result.");
      return;
    }
    const double relative = uncertainty_term("book");
    open_.push_back({&*own, level, relative * level, Origin::book, book_->from, book_->from});
    note(fmt::format("{} was not analysed: {} taken from {}, with {:g} % uncertainty (common practice)",
                     called, show(units::GramsPerLitre{level}), book_->from, 100 * relative));
  } else if (component.found_by == bath::FoundBy::book) {
    levels_.take_none_of(component.species);
    note(fmt::format("{} was not analysed and the book has none: taken as 0", called));
  } else {
    const auto titrations = has_quantity ? methods_for(*own) : std::vector<std::string>{};
    refuse(called, "no level is given and the book has none", "",
           titrations.empty() ? "State it as a concentration found."
                              : fmt::format("Titrate it ({}), or state it as a concentration found.",
                                            fmt::join(titrations, ", ")));
  }
}

/// "from Cl^- and Ni^2+": what a level that nobody measured as such was worked out from.
std::string worked_out_from(const bath::Quantity& quantity) {
  std::vector<std::string> species;
  for (const auto& [name, coefficient] : quantity.counts) species.push_back(name);
  return fmt::format("from {}", fmt::join(species, " and "));
}

void Evaluation::add_result(const bath::Quantity& quantity) {
  const auto level = levels_.of(quantity.counts);
  if (!level) return;
  const double molar_mass = quantity.formula.molar_mass().v;
  const auto direct = std::ranges::find(used_, &quantity, &Finding::quantity);
  std::string how = direct != used_.end() ? direct->how : worked_out_from(quantity);
  if (direct == used_.end() && level->mol_per_L == 0) how = "not analysed, taken as 0";
  if (level->from == Origin::electroneutrality)
    how = type_.acid_by_pH() ? "what balances the charges at this pH" : "what balances the charges";
  analysis_.results.push_back({quantity.id,
                               {level->mol_per_L * molar_mass},
                               {level->u_mol_per_L * molar_mass},
                               level->from,
                               std::move(how),
                               direct != used_.end() ? direct->interferences : "",
                               direct != used_.end() ? direct->titrant_lot : "",
                               direct != used_.end() ? direct->titrated_by : ""});
}

void Evaluation::list_levels() {
  for (const bool salt_views : {false, true}) {
    for (const bath::Quantity& quantity : type_.quantities) {
      if (quantity.salt_view == salt_views) add_result(quantity);
    }
  }
}

void Evaluation::close_with_state() {
  auto state = chemistry_.state_from(levels_.in_use(), analysis_.pH, analysis_.volume, analysis_.temperature);
  if (!state) {
    if (book_ && book_->carried) weigh_and_test(gathered(book_->carried->component_mol[0]));
    problems_ = state.problems();
    for (const Suspect& s : analysis_.suspects) refuse(s.what, s.reason, "", s.try_this);
    return;
  }
  analysis_.state = *std::move(state);
  if (!type_.acid_by_pH()) compare_pH();
  const std::string& counter = counter_ion();
  const auto& components = chemistry_.components();
  const auto index = static_cast<std::size_t>(std::ranges::find(components, counter) - components.begin());
  levels_.close_charge(counter, analysis_.state.component_mol[index] / analysis_.volume.v);
  for (const bath::Quantity& quantity : type_.quantities) {
    if (quantity.counts.contains(counter)) add_result(quantity);
  }
}

// Where acid or alkali is analysed the pH follows; what an electrode shows there is worth a look, no more.
void Evaluation::compare_pH() {
  const auto solved = chemistry_.speciate(analysis_.state);
  if (!solved) return;
  constexpr double noticeable = 0.3;
  if (!readings_.pH) {
    analysis_.pH = solved->pH();
  } else if (std::abs(*readings_.pH - solved->pH()) > noticeable) {
    note(
        fmt::format("pH {} read, but {} follows from the acid and alkali analysed: electrodes err in strong "
                    "acid and alkali; it was not used",
                    units::significant(*readings_.pH, 3), units::significant(solved->pH(), 3)));
  }
}

std::vector<Finding> Evaluation::read_today() const {
  std::vector<Finding> read;
  const bool by_carrying = book_ && book_->carried;
  for (const auto* findings : {&used_, &unused_})
    std::ranges::copy_if(*findings, std::back_inserter(read),
                         [&](const Finding& f) { return !by_carrying || f.from != Origin::book; });
  return read;
}

Gathered Evaluation::gathered(double proton_mol) const {
  std::vector<double> start_mol(chemistry_.components().size(), 0);
  for (std::size_t i = 0; i < start_mol.size(); ++i)
    if (const auto level = levels_.of({{chemistry_.components()[i], 1}}))
      start_mol[i] = level->mol_per_L * analysis_.volume.v;
  return gather(read_today(), {analysis_.volume.v, analysis_.u_volume_L}, start_mol, proton_mol,
                book_ ? book_->carried : std::nullopt, chemistry_);
}

// Before anything is read.
void Evaluation::list_expected() {
  if (!book_ || !book_->carried) return;
  const Carried& carried = *book_->carried;
  note(
      "the book: " + book_->from +
      (carried.counted.empty() ? std::string() : fmt::format(", then {}", fmt::join(carried.counted, ", "))));
  for (const std::string& left_out : carried.not_counted) note("not in the book: " + left_out);
  const Gathered before = gathered(book_->carried->component_mol[0]);
  Weighed as_it_was;
  as_it_was.state = before.weighing.before.mean;
  as_it_was.covariance = before.weighing.before.spread * before.weighing.before.spread.transpose();
  for (const bath::Quantity& quantity : type_.quantities) {
    const ReconciledLevel level = level_of(quantity, before, as_it_was, chemistry_);
    analysis_.expected.push_back(
        {quantity.id, {level.g_per_L}, {level.u_g_per_L}, Origin::book, book_->from});
  }
}

Weighed Evaluation::weigh_and_test(const Gathered& all) {
  Weighed weighed = weigh(all.weighing);
  analysis_.misfit = tested(all, weighed);
  if (book_ && book_->carried) {
    explain(analysis_.misfit, {all, weighed, readings_, tank_, chemistry_, book_->carried});
    suspect_what_misfits();
    suspect_a_copy();
  }
  return weighed;
}

void Evaluation::reconcile() {
  const Gathered all = gathered(analysis_.state.component_mol[0]);
  const Weighed weighed = weigh_and_test(all);
  analysis_.covariance = covariance_of(all, weighed);
  analysis_.reconciled = analysis_.results;
  analysis_.volume_reconciled = analysis_.volume;
  if (all.degrees_of_freedom() > 0) take_reconciled(all, weighed);
}

void Evaluation::take_reconciled(const Gathered& all, const Weighed& weighed) {
  analysis_.volume_reconciled = {weighed.state(weighed.state.size() - 1)};
  for (LevelFound& level : analysis_.reconciled) {
    const ReconciledLevel now = level_of(*type_.quantity(level.quantity), all, weighed, chemistry_);
    level.value = {now.g_per_L};
    level.standard_uncertainty = {now.u_g_per_L};
  }
  std::map<std::string, double> g_per_L = levels_.in_use();
  for (auto& [id, level] : g_per_L)
    level = std::max(level_of(*type_.quantity(id), all, weighed, chemistry_).g_per_L, 0.0);
  auto state =
      chemistry_.state_from(g_per_L, analysis_.pH, analysis_.volume_reconciled, analysis_.temperature);
  if (state)
    analysis_.state = *std::move(state);
  else
    problems_ = state.problems();
}

// Three burettes that stop at the same marks as last time, one in ten each: a thousand to one against.
void Evaluation::suspect_a_copy() {
  constexpr std::size_t enough = 3;
  constexpr double rounding = 1e-9;
  const std::vector<Finding> read = read_today();
  const auto as_last = [&](const Finding& f) {
    const auto last = book_->carried->found_last.find(f.quantity->id);
    return last != book_->carried->found_last.end() && f.g_per_L > 0 &&
           std::abs(f.g_per_L / last->second - 1) < rounding;
  };
  if (read.size() >= enough && std::ranges::all_of(read, as_last))
    analysis_.suspects.push_back({"readings",
                                  fmt::format("all {} are those of the last analysis, to the last digit ({})",
                                              read.size(), book_->from),
                                  "Titrate a sample of today; enter what the burettes show."});
}

void Evaluation::suspect_what_misfits() {
  const Misfit& misfit = analysis_.misfit;
  if (!misfit.alarm) return;
  const std::string apart = fmt::format(
      "readings and book are apart: chi-square {:.1f} of {} readings, which chance alone makes of one "
      "analysis in {}",
      misfit.chi_square, misfit.degrees_of_freedom,
      misfit.probability > 1e-6 ? fmt::format("{:.0f}", 1 / misfit.probability) : "a million or more");
  const auto with = [&](const Explanation& e) {
    return fmt::format("{} (chi-square {:.1f} less)", e.words, e.chi_square_drop);
  };
  if (misfit.one_is_clear) {
    const Explanation& first = misfit.explanations.front();
    analysis_.suspects.push_back({first.culprit, fmt::format("{}; {}.", with(first), apart), first.try_this});
    return;
  }
  std::string reason = apart + "; no single mistake explains it.";
  if (misfit.explanations.size() == 1)
    reason = apart + "; it may be that " + with(misfit.explanations[0]) + ".";
  if (misfit.explanations.size() > 1)
    reason = fmt::format("{}; it may be that {}, or that {}.", apart, with(misfit.explanations[0]),
                         with(misfit.explanations[1]));
  analysis_.suspects.push_back({"levels", std::move(reason),
                                misfit.explanations.empty()
                                    ? "Repeat the analysis on a fresh sample first; add nothing."
                                    : misfit.explanations.front().try_this});
}

void Evaluation::compare_what_was_not_used() {
  for (const Finding& finding : unused_) {
    const auto level = levels_.of(finding.quantity->counts);
    if (!level) continue;
    const double molar_mass = finding.quantity->formula.molar_mass().v;
    const units::GramsPerLitre found{finding.g_per_L}, follows{level->mol_per_L * molar_mass};
    if (disagree(found.v, finding.u_g_per_L, follows.v, level->u_mol_per_L * molar_mass)) {
      analysis_.suspects.push_back(
          {finding.quantity->id,
           fmt::format(
               "{} found, but {} follow from the other levels, more than 3 standard uncertainties apart; "
               "the results rest on the others",
               show(found), show(follows)),
           "Titrate both again."});
    } else {
      note(fmt::format("{} found as {} agrees with the {} that follow from the other levels",
                       finding.quantity->id, show(found), show(follows)));
    }
  }
}

void Evaluation::compare_density() {
  analysis_.density_predicted = chemistry_.density(analysis_.state);
  analysis_.density_measured = readings_.density;
  if (readings_.density) analysis_.density_read = readings_.written.text("density", show(*readings_.density));
  std::ranges::copy(density_misfit(analysis_), std::back_inserter(analysis_.suspects));
}

// Told where it matters and not applied: the flask as computed is not the flask as the eye saw it.
void Evaluation::look_at_end_points() {
  for (const Titration& titration : titrations_) {
    const auto bias = end_point_bias(titration, *method(titration.method),
                                     *type_.quantity(titration.quantity), chemistry_, analysis_.state);
    if (!bias) {
      analysis_.end_points_unknown.push_back(
          {titration.quantity, titration.method, bias.problems().front().what});
      if (bias.problems().front().kind != Fault::out_of_range)
        note(fmt::format("{}: where the end point of {} lies was not computed: {}", titration.quantity,
                         titration.method, bias.problems().front().what));
      continue;
    }
    analysis_.end_points.push_back(*bias);
    const auto level = std::ranges::find(analysis_.results, bias->quantity, &LevelFound::quantity);
    if (level == analysis_.results.end() ||
        !(std::abs(bias->share * level->value.v) > level->standard_uncertainty.v / 2))
      continue;
    const auto mL = [](double value) { return fmt::format("{:+.2f}", value); };
    const std::string range = bias->from_mL == bias->to_mL ? ""
                                                           : fmt::format(" ({} to {} over its range)",
                                                                         mL(bias->from_mL), mL(bias->to_mL));
    note(fmt::format(
        "{}: computed for this flask, {} changes at {} mL{} from the equivalence: the level may read "
        "{} % {}; it was not corrected",
        bias->quantity, bias->indicator, mL(bias->mL), range,
        units::significant(100 * std::abs(bias->share), 2), bias->mL < 0 ? "low" : "high"));
  }
}

}  // namespace

std::string_view name(Origin origin) {
  switch (origin) {
    case Origin::titration:
      return "titration";
    case Origin::found:
      return "found";
    case Origin::book:
      return "book";
    case Origin::electroneutrality:
      return "electroneutrality";
  }
  return "";
}

Result<Analysis> evaluate(const Readings& readings, const bath::Tank& tank, const bath::Chemistry& chemistry,
                          const std::optional<Book>& book) {
  if (!readings.sample_temperature) return Evaluation(readings, tank, chemistry, book, 1).run();

  // The ratio needs the composition and the composition the ratio; water's is within some per cent of it, and
  // each turn makes the error a hundred times smaller.
  const units::Celsius in_tank = readings.temperature.value_or(tank.temperature);
  double ratio = matter::water_density(in_tank) / matter::water_density(*readings.sample_temperature);
  for (int turns_left = 8;; --turns_left) {
    auto analysis = Evaluation(readings, tank, chemistry, book, ratio).run();
    if (!analysis || turns_left == 0) return analysis;
    bath::TankState sample = analysis->state;
    sample.temperature = *readings.sample_temperature;
    const double next = chemistry.volume_L(sample) / chemistry.volume_L(analysis->state);
    if (std::abs(next - ratio) < 1e-6) return analysis;
    ratio = next;
  }
}

}  // namespace bathwright::analysis
