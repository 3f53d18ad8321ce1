#include "reconcile.hpp"

#include <algorithm>
#include <cmath>

#include "chi_square.hpp"
#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

using Eigen::Index;
using Eigen::MatrixXd;
using Eigen::VectorXd;

/// Row of a quantity over all components, g per mol.
VectorXd counted_in_g(const bath::Quantity& quantity, const bath::Chemistry& chemistry) {
  const auto& components = chemistry.components();
  VectorXd row = VectorXd::Zero(static_cast<Index>(components.size()));
  for (const auto& [name, count] : quantity.counts)
    row(std::ranges::find(components, name) - components.begin()) = count * quantity.formula.molar_mass().v;
  return row;
}

class Gathering {
 public:
  Gathering(const bath::Chemistry& chemistry, double proton_mol) : chemistry_(chemistry) {
    const auto& type = chemistry.type();
    const auto& species = chemistry.working().system().species();
    const std::size_t all = chemistry.components().size(), counter = chemistry.found_by_charge();
    const bool by_pH = type.acid_by_pH();
    for (std::size_t i = 0; i < all; ++i)
      if (i != counter && !(i == 0 && by_pH)) out_.components.push_back(i);
    out_.whole = MatrixXd::Zero(static_cast<Index>(all), static_cast<Index>(out_.components.size()));
    out_.rest = VectorXd::Zero(static_cast<Index>(all));
    const double counter_charge = species[counter].charge;
    for (Index c = 0; c < out_.whole.cols(); ++c) {
      const std::size_t i = out_.components[static_cast<std::size_t>(c)];
      out_.whole(static_cast<Index>(i), c) = 1;
      out_.whole(static_cast<Index>(counter), c) = -species[i].charge / counter_charge;
    }
    if (by_pH) {
      out_.rest(0) = proton_mol;
      out_.rest(static_cast<Index>(counter)) = -proton_mol * species[0].charge / counter_charge;
    }
  }

  void read(const std::vector<Finding>& findings, VolumeRead volume) {
    const double sampling = uncertainty_term("sampling");
    for (const Finding& finding : findings) {
      // The sample is one: what it is off the tank, all titrations are off alike.
      const double shared = finding.from == Origin::titration ? sampling : 0;
      const double own2 = finding.u_g_per_L * finding.u_g_per_L - std::pow(shared * finding.g_per_L, 2);
      out_.weighing.readings.push_back({Reading::Of::level, finding.g_per_L, std::sqrt(std::max(own2, 0.0)),
                                        shared, out_.g_per_mol(*finding.quantity, chemistry_),
                                        out_.g_fixed(*finding.quantity, chemistry_)});
      out_.what.push_back(finding.quantity->id);
    }
    out_.weighing.readings.push_back({Reading::Of::volume, volume.L, volume.u_L});
    out_.what.emplace_back("volume");
  }

  void start_from(const Carried& carried) {
    out_.weighing.before.mean = out_.shift(carried.component_mol, carried.volume_L);
    for (const BookTerm& term : carried.terms)
      doubt(term.what, term.entry, out_.shift(term.component_mol, term.volume_L));
    doubt_what_is_new();
  }

  void start_from(const std::vector<double>& start_mol, double volume_L) {
    out_.weighing.before.mean = out_.shift(start_mol, volume_L);
    VectorXd volume = VectorXd::Zero(size());
    volume(size() - 1) = unknown_rel * volume_L;
    doubt("volume", std::nullopt, volume);
    ++out_.unknown;
    doubt_what_is_new();
  }

  Gathered done() && {
    out_.weighing.before.spread.resize(size(), static_cast<Index>(columns_.size()));
    for (std::size_t c = 0; c < columns_.size(); ++c)
      out_.weighing.before.spread.col(static_cast<Index>(c)) = columns_[c];
    return std::move(out_);
  }

 private:
  [[nodiscard]] Index size() const { return static_cast<Index>(out_.components.size()) + 1; }

  void doubt(std::string what, std::optional<std::int64_t> entry, VectorXd column) {
    out_.doubt.push_back(std::move(what));
    out_.entry.push_back(entry);
    columns_.push_back(std::move(column));
  }

  /// What is read today and nobody has said anything of before.
  void doubt_what_is_new() {
    const double largest = out_.weighing.before.mean.head(size() - 1).cwiseAbs().maxCoeff();
    const std::size_t known = columns_.size();
    for (Index c = 0; c + 1 < size(); ++c) {
      const auto is_read = [&](const Reading& r) {
        return r.of == Reading::Of::level && r.g_per_mol(c) != 0;
      };
      const auto said = [&](const VectorXd& column) { return column(c) != 0; };
      if (std::ranges::none_of(out_.weighing.readings, is_read) ||
          std::any_of(columns_.begin(), columns_.begin() + static_cast<std::ptrdiff_t>(known), said))
        continue;
      VectorXd column = VectorXd::Zero(size());
      column(c) = unknown_rel * std::max(std::abs(out_.weighing.before.mean(c)), largest);
      doubt(chemistry_.components()[out_.components[static_cast<std::size_t>(c)]], std::nullopt,
            std::move(column));
      ++out_.unknown;
    }
  }

  static constexpr double unknown_rel = 30;  // pulls the answer by (u/30)^2 of it: 1e-7 for 1 %

  const bath::Chemistry& chemistry_;
  Gathered out_;
  std::vector<VectorXd> columns_;
};

}  // namespace

VectorXd Gathered::shift(const std::vector<double>& component_mol, double volume_L) const {
  VectorXd moved(static_cast<Index>(components.size()) + 1);
  for (std::size_t c = 0; c < components.size(); ++c)
    moved(static_cast<Index>(c)) = component_mol[components[c]];
  moved(moved.size() - 1) = volume_L;
  return moved;
}

VectorXd Gathered::g_per_mol(const bath::Quantity& quantity, const bath::Chemistry& chemistry) const {
  return whole.transpose() * counted_in_g(quantity, chemistry);
}

double Gathered::g_fixed(const bath::Quantity& quantity, const bath::Chemistry& chemistry) const {
  return rest.dot(counted_in_g(quantity, chemistry));
}

Gathered gather(const std::vector<Finding>& findings, VolumeRead volume, const std::vector<double>& start_mol,
                double proton_mol, const std::optional<Carried>& carried, const bath::Chemistry& chemistry) {
  Gathering gathering(chemistry, proton_mol);
  gathering.read(findings, volume);
  if (carried)
    gathering.start_from(*carried);
  else
    gathering.start_from(start_mol, volume.L);
  return std::move(gathering).done();
}

ReconciledLevel level_of(const bath::Quantity& quantity, const Gathered& gathered, const Weighed& weighed,
                         const bath::Chemistry& chemistry) {
  const Index n = weighed.state.size() - 1;
  const double volume = weighed.state(n);
  VectorXd slope(n + 1);
  slope.head(n) = gathered.g_per_mol(quantity, chemistry) / volume;
  const double level =
      slope.head(n).dot(weighed.state.head(n)) + gathered.g_fixed(quantity, chemistry) / volume;
  slope(n) = -level / volume;
  return {level, std::sqrt(std::max(slope.dot(weighed.covariance * slope), 0.0))};
}

std::vector<double> covariance_of(const Gathered& gathered, const Weighed& weighed) {
  const Index amounts = gathered.whole.cols(), components = gathered.whole.rows();
  MatrixXd whole = MatrixXd::Zero(components + 1, amounts + 1);
  whole.topLeftCorner(components, amounts) = gathered.whole;
  whole(components, amounts) = 1;
  const MatrixXd all = whole * weighed.covariance * whole.transpose();
  std::vector<double> rows;
  for (Index r = 0; r < all.rows(); ++r)
    for (Index c = 0; c < all.cols(); ++c) rows.push_back((all(r, c) + all(c, r)) / 2);
  return rows;
}

Misfit tested(const Gathered& gathered, const Weighed& weighed) {
  Misfit misfit;
  misfit.chi_square = weighed.chi_square;
  misfit.degrees_of_freedom = gathered.degrees_of_freedom();
  if (misfit.degrees_of_freedom <= 0) return misfit;
  misfit.probability = chi_square_tail(weighed.chi_square, misfit.degrees_of_freedom);
  const auto readings = static_cast<Index>(gathered.what.size());
  for (Index r = 0; r < readings; ++r)
    misfit.residuals.push_back({gathered.what[static_cast<std::size_t>(r)], std::nullopt,
                                weighed.studentised(VectorXd::Unit(readings, r))});
  const MatrixXd seen = weighed.derivatives * gathered.weighing.before.spread;
  const std::size_t known = gathered.doubt.size() - static_cast<std::size_t>(gathered.unknown);
  for (std::size_t c = 0; c < known; ++c)
    misfit.residuals.push_back(
        {gathered.doubt[c], gathered.entry[c], weighed.studentised(seen.col(static_cast<Index>(c)))});
  double largest = 0;
  for (const Residual& residual : misfit.residuals)
    largest = std::max(largest, std::abs(residual.studentised));
  const double tests = static_cast<double>(misfit.residuals.size());
  misfit.alarm = misfit.probability < false_alarms / 2 || normal_tails(largest) < false_alarms / 2 / tests;
  return misfit;
}

}  // namespace bathwright::analysis
