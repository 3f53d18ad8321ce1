// The command that prints a file: lp, or whatever the shop uses.
#pragma once

#include <bathwright/base/result.hpp>
#include <chrono>
#include <filesystem>

namespace bathwright::work {

inline constexpr const char* usual_print_command = "lp";

/// The command's words with the file in them: in the place of {file}, else as the last word. Words are parted
/// by spaces; what stands between " and " is one word. No shell reads them, so no sign in a name means
/// anything else.
[[nodiscard]] std::vector<std::string> print_words(const std::string& command,
                                                   const std::filesystem::path& file);

/// Runs it and waits. Fails (bad_input) where the command is empty, (io) where it cannot be started, ends
/// with another status than 0 (with the first line it said) or takes longer than `patience`, when it is
/// ended.
Outcome print_file(const std::string& command, const std::filesystem::path& file,
                   std::chrono::milliseconds patience = std::chrono::seconds(60));

}  // namespace bathwright::work
