#include "trends_work.hpp"

#include "work/trends.hpp"

namespace bathwright::desktop {

TrendsAnswer read_trends(const TrendsQuestion& question) {
  TrendsAnswer answer{question.tank.name, {}};
  TrendsView& view = answer.view;
  const auto trends = work::trends_of(question.session, question.tank);
  if (!trends) {
    view.empty = text(trends.problems());
    return answer;
  }
  view.charts = sheets::trends_charts(*trends).charts;
  for (const auto& one : trends->quantities)
    for (std::string& words : sheets::findings_in_words(one)) view.findings.push_back(std::move(words));
  if (view.charts.empty())
    view.empty = "The log has fewer than " + std::to_string(trends::least_values) +
                 " analyses of each quantity of this tank: too few for limits.";
  return answer;
}

}  // namespace bathwright::desktop
