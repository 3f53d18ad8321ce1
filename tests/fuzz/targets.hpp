// What is fuzzed: every reader of text that comes from outside. Each target feeds one input to one reader and
// holds the reader to what its header promises, so that a wrong answer is found as well as a crash.
#pragma once

#include <string>
#include <string_view>

namespace fuzz {

/// The promise that was broken, in words; empty where all were kept.
using BrokenPromise = std::string;

BrokenPromise tank_file(std::string_view input);
BrokenPromise readings_file(std::string_view input);
BrokenPromise solution_file(std::string_view input);
BrokenPromise described_file(std::string_view input);
BrokenPromise fit_file(std::string_view input);
BrokenPromise formula(std::string_view input);
BrokenPromise quantity(std::string_view input);
BrokenPromise csv_table(std::string_view input);
BrokenPromise reaction(std::string_view input);
BrokenPromise plugin_tables(std::string_view input);
BrokenPromise analyses_csv(std::string_view input);

}  // namespace fuzz
