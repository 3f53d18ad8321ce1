// An equilibrium constant and how it moves with temperature. Every part of it is linear, so the constants of
// added reactions add. Not for: reading tables (equilibria.hpp).
#pragma once

#include <bathwright/units/quantity.hpp>

namespace bathwright::speciation {

/// What a heat capacity of reaction has beside its constant part, T in K:
///   dCp(T) = dCp + linear T + square T^2 + inverse_square / T^2 + pole / (T - 228 K)^2 + born T X(T)
/// The first three are those of a published log10 K = A + B T + C/T + D log10 T + E/T^2 + F T^2; the last two
/// the heat capacity of a dissolved substance in the revised equation of state of Helgeson, Kirkham & Flowers
/// (Tanger & Helgeson 1988, Am. J. Sci. 288:19), X = d/dT [(1/eps^2) d eps/dT] of water at 1 bar.
struct HeatCapacityCurve {
  double linear = 0;          ///< J/(mol K^2)
  double square = 0;          ///< J/(mol K^3)
  double inverse_square = 0;  ///< J K/mol
  double pole = 0;            ///< J K/mol
  double born = 0;            ///< J/mol

  void add(const HeatCapacityCurve& other, double times);
};

/// A published temperature function of log10 K: A + B T + C/T + D log10 T + E/T^2 + F T^2, T in K.
struct TemperatureFunction {
  double A = 0, B = 0, C = 0, D = 0, E = 0, F = 0;

  [[nodiscard]] double log10_at(units::Celsius t) const;
};

/// log10 K, enthalpy and heat capacity of a reaction at 25 degC.
struct ReactionAt25C {
  double log10_K = 0;
  double dH_kJ_per_mol = 0;
  double dCp_J_per_molK = 0;  ///< the constant part of dCp
  HeatCapacityCurve curve{};

  /// The same function, written as its value and derivatives at 25 degC.
  static ReactionAt25C of(const TemperatureFunction& function);
};

///   log10 K(T) = log10 K(T0) + [-(dH/R)(1/T - 1/T0) + (1/R) (int dCp/T dT - (1/T) int dCp dT)] / ln 10,
/// both integrals from T0 = 298.15 K to T. With a constant dCp this is
///   log10 K(T0) + [-(dH - T0 dCp)(1/T - 1/T0)/R + (dCp/R) ln(T/T0)] / ln 10.
struct Constant {
  double log10_K = 0;        ///< 25 degC, molal, zero ionic strength
  double dH_kJ_per_mol = 0;  ///< 0 and has_dH = false: unknown, no temperature correction
  double dCp_J_per_molK = 0;
  double uncertainty = 0;  ///< one standard uncertainty of log10 K at 25 degC
  bool has_dH = true;
  HeatCapacityCurve curve{};
  double u_dH_kJ_per_mol = 0, u_dCp_J_per_molK = 0;  ///< standard uncertainties at 25 degC

  [[nodiscard]] double log10_at(units::Celsius t) const;
  /// Standard uncertainty of log10 K there: of 25 degC, of dH and of dCp, taken as independent.
  [[nodiscard]] double uncertainty_at(units::Celsius t) const;
  /// The heat capacity of reaction, J/(mol K).
  [[nodiscard]] double heat_capacity_at(units::Celsius t) const;
  /// The constant of `times` times the reaction added to this one.
  void add(const Constant& other, double times);
};

}  // namespace bathwright::speciation
