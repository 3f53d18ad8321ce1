// One chemical problem in dense form: only the components that are present, the species they can form and the
// phases that matter, over a basis that can be changed to the most abundant species. All storage is taken
// when a workspace is made; loading and solving allocate nothing.
#pragma once

#include <Eigen/Dense>
#include <bathwright/speciation/solver.hpp>
#include <vector>

namespace bathwright::speciation {

using Index = Eigen::Index;
/// Storage inside the object, so that no product or copy allocates: per component (and one for the water),
/// square tables of those, per species, components x species.
inline constexpr int most_rows = max_components + 1;
using Vector = Eigen::Matrix<double, Eigen::Dynamic, 1, 0, most_rows, 1>;
using Table = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, 0, most_rows, most_rows>;
using SpeciesVector = Eigen::Matrix<double, Eigen::Dynamic, 1, 0, activity::max_solutes, 1>;
using Stoichiometry =
    Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, 0, max_components, activity::max_solutes>;

/// A condition  condition'x + water ln a_w = ln_K  that holds while `active`, with `supply` added to (formed:
/// taken from) the totals per mol. A solid and a held gas supply what they condition (supply = condition); a
/// held pH supplies H^+ with its counter-ion.
struct Phase {
  enum class Kind : std::uint8_t { precipitate, excess, gas, ph };
  Kind kind;
  std::size_t index;  ///< in the system's solids or gases
  Vector condition, supply;
  double water;         ///< of the condition
  double supply_water;  ///< H2O bound per mol
  double ln_K;
  bool active = false;
  double mol = 0;  ///< formed (precipitate, excess), or minus the amount supplied (gas, pH)
};

/// What the solver moves.
struct State {
  Vector x;                ///< ln activity of the basis
  SpeciesVector ln_gamma;  ///< per kind of solute
  SpeciesVector ln_m;      ///< ln molality per species, as the last coupled Newton met the balances with
  double ln_aw = 0;
  double water_kg = 1;
};

class Workspace : public State {
 public:
  explicit Workspace(const Solver& solver);

  /// The problem of a task, over the components as basis, all precipitates inactive.
  void load(const Task& task, const Constants& ln_K);
  /// The same problem with other amounts and constants: keeps state, basis and active phases. False, with
  /// nothing changed, when the task differs in what is present or held.
  bool reload(const Task& task, const Constants& ln_K);

  [[nodiscard]] Index components() const { return form_.A.rows(); }
  [[nodiscard]] Index count() const { return form_.A.cols(); }
  [[nodiscard]] std::size_t kinds() const { return model_->kinds(); }
  [[nodiscard]] const activity::ActivityModel& model() const { return *model_; }
  /// Another number whenever what x stands for has changed.
  [[nodiscard]] std::uint64_t basis() const { return basis_; }

  /// ln molality of every species at the current state.
  void ln_molality(SpeciesVector& result) const;
  /// The same as molalities, none above e^highest; above e^7 nothing is a solution any more.
  void molality(SpeciesVector& result, double highest = 7) const;
  /// Sums over each kind of solute.
  void sum_kinds(const SpeciesVector& molality, SpeciesVector& in_kind) const;

  /// Where a component's own species holds less than 1e-6 of it, puts the most abundant species or present
  /// solid that holds it in its place, and rewrites everything over the new basis. x moves with it. Returns
  /// whether anything changed.
  bool rebase(const SpeciesVector& molality);

  SpeciesVector ln_K;      ///< per species
  SpeciesVector charge;    ///< per species
  Vector total;            ///< per component, mol
  double total_water = 0;  ///< mol
  std::vector<Phase> phases;
  std::vector<std::size_t> species;  ///< workspace position -> system position
  std::vector<std::uint16_t> kind;   ///< per species
  Index proton = 0;                  ///< row of H^+ in the first basis

  /// The entries of A that are not zero, column by column; row components() stands for water.
  struct Entry {
    std::uint16_t row;
    double value;
  };
  [[nodiscard]] const Entry* begin(Index j) const {
    return form_.entries.data() + form_.first[static_cast<std::size_t>(j)];
  }
  [[nodiscard]] const Entry* end(Index j) const {
    return form_.entries.data() + form_.first[static_cast<std::size_t>(j) + 1];
  }

  /// The species that hold component i, and how many of it each.
  struct Holder {
    Index species;
    double count;
  };
  [[nodiscard]] std::span<const Holder> holders(Index i) const {
    const auto at = static_cast<std::size_t>(i);
    return {form_.holders.data() + form_.first_holder[at],
            form_.first_holder[at + 1] - form_.first_holder[at]};
  }

  /// Room for the methods, aligned rows: see their use in coupled_newton.cpp and convex_dual.cpp.
  std::vector<double> kind_table, by_kind, derivative, elimination, curvature;

  /// H2O bound in the species of a composition, mol per kg of water.
  [[nodiscard]] double bound_water(const SpeciesVector& molality) const { return form_.water.dot(molality); }

 private:
  /// What everything is made of over the present basis, densely and by its entries.
  struct Form {
    Stoichiometry A;      ///< components x species
    SpeciesVector water;  ///< H2O per species
    std::vector<std::size_t> first,
        first_holder;  ///< per species: its first entry; per component: its first holder
    std::vector<Entry> entries;
    std::vector<Holder> holders;
  };
  struct BasisMember {
    bool is_phase;
    std::size_t index;  ///< in `species` or `phases`
    bool operator==(const BasisMember&) const = default;
  };
  void compile(const Task& task);
  void fill(const Task& task, const Constants& ln_K);
  void list_entries();
  void over_components(Index rows);
  void return_to_components();
  [[nodiscard]] Index scarce_component(const SpeciesVector& molality) const;
  [[nodiscard]] BasisMember most_abundant_holder(Index component, const SpeciesVector& molality) const;
  void exchange(Index component, BasisMember member);
  [[nodiscard]] bool same_problem(const Task& task) const;

  const Solver* solver_;
  const activity::ActivityModel* model_;
  std::vector<Index> row_of_;  ///< per component of the system, -1: absent
  std::vector<bool> present_, was_present_;
  std::vector<SolidRule> rules_;
  std::vector<std::size_t> held_gases_;
  std::optional<std::size_t> counter_ion_;
  Form form_;
  bool rebased_ = false;
  bool original_kept_ = false;
  Form original_;  ///< over the components, kept from the first change of basis on
  std::vector<Phase> original_phases_;
  std::vector<BasisMember> members_;
  std::uint64_t basis_ = 0;
  Table inverse_;  ///< basis over components -> basis over members
};

}  // namespace bathwright::speciation
