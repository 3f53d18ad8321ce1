// The problems of one bath type, each with its table, row and field.
#pragma once

#include <bathwright/base/result.hpp>

namespace bathwright::plugin_host {

/// A field of a plugin's tables. Row 1 is the first; row 0 stands for a field of the bath type itself.
struct Place {
  const char* table = "";
  std::size_t row = 0;
  const char* field = "";
};

class Report {
 public:
  /// `subject` names the bath type in every message.
  explicit Report(std::string subject) : subject_(std::move(subject)) {}

  void add(Place place, std::string what, std::string expected = {}, std::string try_this = {},
           Fault kind = Fault::inconsistent_data) {
    std::string where = subject_;
    if (place.row > 0) where += ' ' + std::string(place.table) + " row " + std::to_string(place.row);
    if (*place.field) where += ' ' + std::string(place.field);
    problems_.push_back({kind, std::move(where), std::move(what), std::move(expected), std::move(try_this)});
  }
  [[nodiscard]] const Problems& problems() const { return problems_; }

 private:
  std::string subject_;
  Problems problems_;
};

}  // namespace bathwright::plugin_host
