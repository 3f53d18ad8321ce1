// What the program says of every demonstration tank, in one table.
#pragma once

#include <nlohmann/json.hpp>
#include <string>
#include <vector>

namespace bath_table {

struct Row {
  std::string file;           ///< baths/n-07.toml
  int status = -1;            ///< of `bathwright tank FILE --json`
  std::string message;        ///< to standard error
  nlohmann::json tank, type;  ///< of `tank`, and of `plugins show` for its bath type
};

/// Every tank file of baths/, by file name.
[[nodiscard]] std::vector<Row> demonstration_tanks();

/// Ids of the bath types that come with the program.
[[nodiscard]] std::vector<std::string> shipped_bath_types();

/// Limits of a subject in the windows of the bath type, NaN where open or none.
struct Limits {
  double low, high;
};
[[nodiscard]] Limits window(const nlohmann::json& type, const std::string& subject);

/// The whole as Markdown.
[[nodiscard]] std::string markdown(const std::vector<Row>& rows);

}  // namespace bath_table
