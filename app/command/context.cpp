#include "context.hpp"

#include <algorithm>
#include <cstdio>

namespace bathwright::command {
namespace {

std::string_view word(Fault fault) {
  switch (fault) {
    case Fault::bad_input:
      return "bad input";
    case Fault::out_of_range:
      return "out of range";
    case Fault::not_converged:
      return "not converged";
    case Fault::inconsistent_data:
      return "inconsistent data";
    case Fault::io:
      return "file or database";
    case Fault::refused:
      return "refused";
  }
  return "";
}

}  // namespace

void print(const sheets::Lines& lines) {
  for (const std::string& line : lines) std::printf("%s\n", line.c_str());
}

void print(const Json& document) {
  constexpr int indent = 2;
  std::printf("%s\n", text_of(document, indent).c_str());
}

int fail(const Context& context, const Problems& problems) {
  for (const Problem& problem : problems) std::fprintf(stderr, "%s\n", problem.text().c_str());
  if (context.json) {
    Json answer = document({});
    answer["problems"] = Json::array();
    for (const Problem& p : problems)
      answer["problems"].push_back({{"kind", word(p.kind)},
                                    {"where", p.where},
                                    {"what", p.what},
                                    {"expected", p.expected},
                                    {"try", p.try_this}});
    print(answer);
  }
  const bool broke_off = std::any_of(problems.begin(), problems.end(), [](const Problem& p) {
    return p.kind == Fault::not_converged || p.kind == Fault::io;
  });
  return broke_off ? Exit::unfinished : Exit::bad_input;
}

}  // namespace bathwright::command
