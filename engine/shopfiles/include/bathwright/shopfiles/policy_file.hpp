// Reads a policy: how a shop runs a tank. Every key: baths/README.md.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/bath/bath_type.hpp>
#include <bathwright/forecast/policy.hpp>
#include <string>
#include <string_view>

namespace bathwright::shopfiles {

/// The policy in the TOML file at `path`, for a tank of `type` (whose quantities and uses give the file's
/// figures their meaning). Fails with every problem of the file, sorted by line, each with `file:line: key`.
Result<forecast::Policy> read_policy(const std::string& path, const bath::BathType& type);

/// The same from text already in memory; `name` stands for the file in messages.
Result<forecast::Policy> read_policy_text(std::string_view name, std::string_view text,
                                          const bath::BathType& type);

}  // namespace bathwright::shopfiles
