#include "trends_work.hpp"

#include "work/trends.hpp"

namespace bathwright::desktop {

TrendsAnswer read_trends(const TrendsQuestion& question) {
  TrendsAnswer answer{question.tank.name, {}, {}, {}};
  auto trends = work::trends_of(question.session, question.tank);
  if (!trends) {
    answer.empty = text(trends.problems());
    return answer;
  }
  for (const auto& one : trends->quantities)
    for (std::string& words : sheets::findings_in_words(one)) answer.findings.push_back(std::move(words));
  const bool drawn =
      std::ranges::any_of(trends->quantities, [](const auto& one) { return one.trend.found.has_value(); });
  if (!drawn)
    answer.empty = "The log has fewer than " + std::to_string(trends::least_values) +
                   " analyses of each quantity of this tank: too few for limits.";
  answer.trends = *std::move(trends);
  return answer;
}

}  // namespace bathwright::desktop
