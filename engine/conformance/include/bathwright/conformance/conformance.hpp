// Whether a bath type is fit to be used and given away, check by check. What its code does while it runs is
// found by plugin_host's probe; here stands what its file and its papers say, and whether the engine gives
// what was worked out by hand.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/conformance/check.hpp>
#include <bathwright/plugin_host/probe_report.hpp>
#include <filesystem>

namespace bathwright::conformance {

/// The folder with README.md and examples.toml of a bath type: named as its id, beside its file.
[[nodiscard]] std::filesystem::path papers_of(const std::filesystem::path& file, const std::string& id);

/// Groups file, tables, entry and functions of a compiled bath type: what its probe found, and what its file
/// says of itself.
[[nodiscard]] std::vector<Check> check_code(const std::filesystem::path& file,
                                            const plugin_host::ProbeReport& probed);

/// Groups tables (what only a release must hold), examples (replayed) and docs of a bath type whose tables
/// were read from `file`. Papers that are not there are a failure of a release and skipped otherwise.
[[nodiscard]] std::vector<Check> check_papers(const bath::BathType& type, const std::filesystem::path& file,
                                              Strictness strictness);

}  // namespace bathwright::conformance
