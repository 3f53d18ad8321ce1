// What every activity model offers the solver: ln gamma and ln a(water) from molalities at one temperature.
// Molality scale, infinite-dilution reference; single-ion values follow each model's own convention (Pitzer:
// unscaled). Not for: deciding which model to use (make_model.hpp).
#pragma once

#include <cstdint>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::activity {

enum class ModelKind { davies, debye_huckel, sit, pitzer };

[[nodiscard]] std::string_view name(ModelKind kind);

/// Whether weak ion pairs are part of the activity coefficients (interaction) or explicit species
/// (association). A set of equilibria made for one must not be used with the other: the same attraction
/// would be counted twice.
enum class Convention { interaction, association };

[[nodiscard]] Convention convention(ModelKind kind);

struct Solute {
  std::string name;  ///< "Ni^2+", "H3BO3"
  int charge = 0;
};

/// The charge written in a species name: 2 for "Ni^2+", -1 for "OH^-", 0 for a neutral one.
[[nodiscard]] int charge_in_name(std::string_view name);

/// kg of water per mol; the molar mass the published parameters were fitted with.
inline constexpr double water_kg_per_mol = 0.0180153;

/// Something about an interaction that a user must be able to see: it was missing, guessed, out of its range,
/// somebody's own.
struct InteractionNote {
  enum class Kind : std::uint8_t {
    missing,
    estimated,
    no_temperature_data,
    above_range,
    outside_model,
    accuracy,  ///< of the published itself: counts in every uncertainty, told only as part of the whole
    stated     ///< by whoever asked for the model, beside the tables
  };
  Kind kind = Kind::missing;
  std::vector<std::uint32_t>
      solutes;             ///< whose molalities decide whether it matters: positions in the solute list
  double limit_molal = 0;  ///< above_range: end of the fit, mol/kg
  std::string text;        ///< "Ni^2+ - HSO4^-: estimated (...)"
  struct Counted {
    std::uint32_t solute;
    double weight;
  };
  std::vector<Counted> counted{};  ///< above_range: the sum that must not exceed the limit; none: the salt
  /// Standard uncertainty of ln gamma of each of the solutes that comes of it, per mol/kg of the other (of
  /// two others: of their product). By the named rules of the model's parameters; 0 where no size can be
  /// given.
  double u_ln_gamma = 0;
};

/// One model, prepared for a fixed list of solutes at one temperature. Immutable: any number of threads may
/// use it at once. No call allocates.
///
/// A model sees solutes by *kind*: solutes of one charge with the same parameters towards everything have one
/// ln gamma, and only the sum of their molalities acts on others. A bath of a hundred complexes about which
/// nothing is published has some thirty kinds, and whoever needs derivatives works with those.
class ActivityModel {
 public:
  virtual ~ActivityModel() = default;

  /// molality (n), mol/kg, >= 0 -> ln_gamma (n). Returns ln of the activity of water.
  double evaluate(std::span<const double> molality, std::span<double> ln_gamma) const;

  /// kind_of()[i] is the kind of solute i, below kinds().
  [[nodiscard]] std::span<const std::uint16_t> kind_of() const { return kind_of_; }
  [[nodiscard]] std::size_t kinds() const { return kinds_; }

  /// The same with molalities summed over each kind (kinds()) -> ln gamma of each kind.
  virtual double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const = 0;

  /// Also d ln gamma_k / d m_l of all kinds, derivative[k * kinds() + l].
  virtual double evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                                std::span<double> derivative) const = 0;

  [[nodiscard]] virtual ModelKind kind() const = 0;
  [[nodiscard]] virtual std::span<const InteractionNote> notes() const = 0;
  /// The ionic strength above which the model as such is not to be trusted, mol/kg (infinite: decided by
  /// notes).
  [[nodiscard]] virtual double trusted_ionic_strength() const = 0;

 protected:
  explicit ActivityModel(std::vector<std::uint16_t> kind_of);

 private:
  std::vector<std::uint16_t> kind_of_;
  std::size_t kinds_;
};

/// The most solutes a model takes; a bath type may list at most this many species.
inline constexpr std::size_t max_solutes = 256;

/// I = 1/2 sum m z^2, mol/kg.
[[nodiscard]] double ionic_strength(std::span<const double> molality, std::span<const int> charge);

}  // namespace bathwright::activity
