#include "trends_work.hpp"

#include "work/trends.hpp"

namespace bathwright::desktop {

TrendsAnswer read_trends(const TrendsQuestion& question) {
  TrendsAnswer answer{question.tank.name, {}, {}, {}};
  const auto trends = work::trends_of(question.session, question.tank);
  if (!trends) {
    answer.empty = text(trends.problems());
    return answer;
  }
  answer.charts = sheets::trends_charts(*trends).charts;
  for (const auto& one : trends->quantities)
    for (std::string& words : sheets::findings_in_words(one)) answer.findings.push_back(std::move(words));
  if (answer.charts.empty())
    answer.empty = "The log has fewer than " + std::to_string(trends::least_values) +
                   " analyses of each quantity of this tank: too few for limits.";
  return answer;
}

}  // namespace bathwright::desktop
