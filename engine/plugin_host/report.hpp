// The problems of one bath type, each with its table, row and field.
#pragma once

#include <bathwright/plugin_host/bath_type_reader.hpp>

namespace bathwright::plugin_host {

class Report {
 public:
  /// `subject` names the bath type in every message.
  explicit Report(std::string subject) : subject_(std::move(subject)) {}

  void add(const Place& place, std::string what, std::string expected = {}, std::string try_this = {},
           Fault kind = Fault::inconsistent_data) {
    std::string where = subject_;
    if (place.row > 0) where += ' ' + place.table + " row " + std::to_string(place.row);
    if (!place.field.empty()) where += ' ' + std::string(place.field);
    problems_.push_back({kind, std::move(where), std::move(what), std::move(expected), std::move(try_this)});
    places_.push_back(place);
  }
  [[nodiscard]] const Problems& problems() const { return problems_; }
  [[nodiscard]] const std::vector<Place>& places() const { return places_; }  ///< of each problem

 private:
  std::string subject_;
  Problems problems_;
  std::vector<Place> places_;
};

}  // namespace bathwright::plugin_host
