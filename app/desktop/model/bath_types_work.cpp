#include "bath_types_work.hpp"

#include <algorithm>

#include "work/shop.hpp"

namespace bathwright::desktop {
namespace {

BathTypeRow row_of(const plugin_host::Listed& listed, const plugin_host::AllowList* allowed) {
  using plugin_host::State;
  BathTypeRow row;
  row.id = listed.id.empty() ? listed.path.stem().stem().string() : listed.id;
  row.version = listed.version;
  row.state = std::string(plugin_host::name(listed.state));
  row.file = listed.path.string();
  row.sha256 = listed.sha256;
  if (listed.state != State::ready)
    row.mark = listed.state == State::shadowed ? charts::State::act : charts::State::stop;
  for (const Problem& problem : listed.problems) row.why += (row.why.empty() ? "" : " ") + problem.text();
  row.may_be_allowed = listed.state == State::not_allowed || listed.state == State::quarantined;
  row.may_be_withdrawn = allowed && allowed->holds(listed.sha256);
  return row;
}

}  // namespace

void read_bath_types(const BathTypesQuestion& question, const std::function<void(BathTypesAnswer)>& give) {
  BathTypesAnswer answer;
  const auto types = work::known_bath_types(question.session);
  const auto allowed = work::allowed_plugins(question.session);
  for (const auto& listed : types.list())
    answer.rows.push_back(row_of(listed, allowed ? &*allowed : nullptr));
  // What a person may decide stands first, under the question about it.
  std::ranges::stable_partition(
      answer.rows, [](const BathTypeRow& row) { return row.may_be_allowed || row.may_be_withdrawn; });
  give(answer);
  if (question.examine.empty()) return;
  answer.examination =
      Examination{question.examine, work::examine_plugin(question.session, question.examine)};
  give(std::move(answer));
}

ExaminedView examined_view(const Examination& examination) {
  ExaminedView view;
  view.what_it_means = work::what_allowing_means;
  view.facts = {{"file", examination.file.string()}};
  if (!examination.found) {
    for (const Problem& problem : examination.found.problems()) view.faults.push_back(problem.text());
    return view;
  }
  const plugin_host::Examined& examined = *examination.found;
  view.sha256 = examined.sha256;
  view.facts.emplace_back("SHA-256", examined.sha256);
  for (const auto& type : examined.report.types) {
    view.facts.emplace_back("bath type", type.id + " " + type.version + ", " + type.name);
    view.facts.emplace_back("author", type.author);
    view.facts.emplace_back("licence", type.licence);
  }
  for (const Problem& problem : examined.report.problems()) view.faults.push_back(problem.text());
  return view;
}

}  // namespace bathwright::desktop
