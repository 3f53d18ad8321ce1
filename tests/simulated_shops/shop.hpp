// A shop that does not exist: a tank that is worked, topped up, dosed and analysed hour by hour, with a truth
// that is known and a log that is not quite. It shares nothing with the engine but the history it writes.
#pragma once

#include <bathwright/forecast/policy.hpp>
#include <bathwright/learning/history.hpp>
#include <map>
#include <random>
#include <string>
#include <vector>

namespace simulated_shops {

/// Something dissolved, followed in grams.
struct Substance {
  std::string quantity;  ///< as the bath type calls it
  double start_g_per_L = 0;
  double u_titration = 0.01;  ///< repeatability, relative
  int every_days = 1;         ///< analysed on days that work; the first day all are
};

/// A product, g of each substance in a kg, in the order of Kind::substances.
struct Product {
  std::string stock;
  std::vector<double> g_per_kg;
  std::size_t for_substance = 0;  ///< brought to its start level
  double weighed_to_kg = 0.1;
  double least_share = 0.02;  ///< of the content: less is not worth adding
  bool every_shift = false;   ///< fed evenly and logged at the end of the shift, else added in the morning
};

/// What work does: truth is this with the factors of a Truth.
struct Work {
  std::string use;
  std::vector<double> effects_g;  ///< per unit, times the effects factor
  std::vector<double> plated_g;   ///< per unit at an efficiency of 1
  double efficiency = 1, given_back = 0;
  double u_efficiency = 0;  ///< 0: fixed
  double u_effects = 0, u_meter = 0;
  double units_per_shift = 0;
  bool by_surface_hour = false;  ///< goes by itself
};

struct Kind {
  std::string name, tank_file, bath_type;
  double mark_L = 0, surface_m2 = 0;
  std::vector<Substance> substances;
  std::vector<Product> products;
  std::vector<Work> work;  ///< the first carries the area
  double area_m2_per_shift = 0, film_L_per_m2 = 0.1, u_film = 0.5;
  double evaporation_L_per_h = 0, idle_evaporation_L_per_h = 0, u_evaporation = 0.5;
  std::vector<double> water_g_per_L;
  double u_water = 0.5;
  bool water_logged = false;
  double dumped_L_per_day = 0;

  [[nodiscard]] bathwright::forecast::Policy policy() const;
};

const std::vector<Kind>& kinds();

/// Factors on what the policy and the bath type state; per Kind::work.
struct Truth {
  double drag_out = 1, evaporation = 1, idle_evaporation = 1, water = 1;
  std::vector<double> efficiency, effects, meter;  ///< efficiency itself; meter: true units over logged
};

/// Of the prior; `wide` times as far out.
Truth draw_truth(const Kind& kind, std::mt19937_64& random, double wide = 1);

enum class Fault { none, addition_not_logged, addition_not_made, meter_changes, titration_wrong };

struct Log {
  bathwright::learning::History history;
  Fault fault = Fault::none;
  double fault_at_h = 0;
  std::string fault_subject;  ///< stock or quantity
  double fault_share = 0;     ///< of an addition: of what the tank holds
  bool fault_happened = false;
};

/// Weeks of five days and two shifts of eight hours, from a Monday 00:00 on.
Log run_shop(const Kind& kind, const Truth& truth, int weeks, std::mt19937_64& random,
             Fault fault = Fault::none);

}  // namespace simulated_shops
