// Reads a list of additions that somebody wrote. Every key: baths/README.md.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/units/quantity.hpp>
#include <string>
#include <string_view>
#include <vector>

namespace bathwright::shopfiles {

/// One addition as written; the amount is read by who knows whether the chemical is a liquid.
struct WrittenAddition {
  std::string chemical;  ///< id, "boric-acid"
  std::string amount;    ///< "4 kg", "1.2 L"
  std::string where;     ///< "list.toml:5: addition", for messages
};

struct WrittenAdditions {
  units::Litres take_out{0};  ///< of bath, before anything is added
  std::vector<WrittenAddition> additions;
};

/// The additions of the TOML file at `path`, in their order; at least one. Fails with every problem of the
/// file, with `file:line: key`.
Result<WrittenAdditions> read_additions(const std::string& path);

/// The same from text already in memory; `name` stands for the file in messages.
Result<WrittenAdditions> read_additions_text(std::string_view name, std::string_view text);

}  // namespace bathwright::shopfiles
