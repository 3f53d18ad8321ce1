#include "bathwright/shifts/pattern.hpp"

#include <fmt/format.h>

#include <array>
#include <bathwright/base/letters.hpp>
#include <bathwright/base/nearest.hpp>
#include <nlohmann/json.hpp>

namespace bathwright::shifts {
namespace {

using Json = nlohmann::json;

constexpr std::size_t longest_shown = 40;

/// Asks one JSON object for its keys, and notes what is missing, wrong or unknown.
class Keys {
 public:
  Keys(const Json& object, std::string place, Problems& problems)
      : object_(object), place_(std::move(place)), problems_(problems) {}

  std::string text(const std::string& key, bool required) {
    const Json* value = find(key, required, "a text");
    if (!value) return "";
    if (!value->is_string()) {
      report(key, "is no text", "a text in double quotes");
      return "";
    }
    return value->get<std::string>();
  }

  std::vector<std::string> texts(const std::string& key) {
    std::vector<std::string> texts;
    const Json* list = find(key, false, "");
    if (!list) return texts;
    for (const Json& item : list->is_array() ? *list : Json::array({nullptr})) {
      if (!item.is_string()) {
        report(key, "is no list of texts", R"(a list such as ["Mon","Tue"])");
        return {};
      }
      texts.push_back(item.get<std::string>());
    }
    return texts;
  }

  const Json* objects(const std::string& key) {
    const Json* list = find(key, true, "a list");
    if (!list || (list->is_array() && std::ranges::all_of(*list, &Json::is_object))) return list;
    report(key, "is no list of objects", R"([{"name":"day","starts":"06:00"}, ...])");
    return nullptr;
  }

  /// Call it when every key was asked for.
  void report_unknown() {
    for (const auto& [key, value] : object_.items()) {
      if (std::ranges::count(known_, key)) continue;
      const auto near = nearest(key, known_);
      problems_.push_back({Fault::bad_input, place_ + printable(key), "is not a key known here", "",
                           near ? "Did you mean " + *near + "?" : "Remove it."});
    }
  }

 private:
  const Json* find(const std::string& key, bool required, const char* expected) {
    known_.push_back(key);
    const auto found = object_.find(key);
    if (found != object_.end()) return &*found;
    if (required) report(key, "is missing", expected);
    return nullptr;
  }

  void report(const std::string& key, std::string what, std::string expected) {
    problems_.push_back({Fault::bad_input, place_ + key, std::move(what), std::move(expected), ""});
  }

  static std::string printable(std::string_view text) {
    std::string shown(whole_letters(text, longest_shown));
    for (char& c : shown)
      if ((c >= 0 && c < 0x20) || c == 0x7f) c = '?';
    return shown;
  }

  const Json& object_;
  std::string place_;
  Problems& problems_;
  std::vector<std::string> known_;
};

Shift read_shift(const Json& object, const std::string& place, Problems& problems) {
  Keys keys(object, place, problems);
  Shift shift;
  shift.name = keys.text("name", true);
  shift.starts = keys.text("starts", true);
  shift.ends = keys.text("ends", false);
  shift.days = keys.texts("days");
  keys.report_unknown();
  return shift;
}

}  // namespace

std::span<const std::string> ready_made_names() {
  static const std::array<std::string, 2> names = {"2x12", "3x8"};
  return names;
}

Result<ShiftPattern> ready_made(std::string_view name, std::string zone) {
  if (name == "2x12") return ShiftPattern{std::move(zone), {{"day", "06:00"}, {"night", "18:00"}}};
  if (name == "3x8")
    return ShiftPattern{std::move(zone), {{"early", "06:00"}, {"late", "14:00"}, {"night", "22:00"}}};
  const auto near = nearest(name, ready_made_names());
  return Problem{Fault::bad_input, "", fmt::format("there is no ready-made pattern '{}'", name),
                 fmt::format("{}", fmt::join(ready_made_names(), " or ")),
                 near ? "Did you mean " + *near + "?" : "Give the shifts of your own one by one."};
}

std::string to_json(const ShiftPattern& pattern) {
  Json shifts = Json::array();
  for (const Shift& shift : pattern.shifts) {
    Json object = {{"name", shift.name}, {"starts", shift.starts}};
    if (!shift.ends.empty()) object["ends"] = shift.ends;
    if (!shift.days.empty()) object["days"] = shift.days;
    shifts.push_back(std::move(object));
  }
  return Json{{"zone", pattern.zone}, {"shifts", std::move(shifts)}}.dump(-1, ' ', false,
                                                                          Json::error_handler_t::replace);
}

Result<ShiftPattern> pattern_from_json(std::string_view json, std::string_view where) {
  const Json document = Json::parse(json, nullptr, false);
  if (!document.is_object()) {
    return Problem{Fault::bad_input, std::string(where),
                   document.is_discarded() ? "is not JSON" : "is no JSON object",
                   R"({"zone":"Europe/Berlin","shifts":[{"name":"day","starts":"06:00"}, ...]})", ""};
  }
  const std::string place = where.empty() ? "" : std::string(where) + ": ";
  Problems problems;
  Keys keys(document, place, problems);
  ShiftPattern pattern;
  pattern.zone = keys.text("zone", true);
  if (const Json* shifts = keys.objects("shifts")) {
    for (std::size_t i = 0; i < shifts->size(); ++i)
      pattern.shifts.push_back(
          read_shift((*shifts)[i], fmt::format("{}shifts, number {}: ", place, i + 1), problems));
  }
  keys.report_unknown();
  if (!problems.empty()) return problems;
  return pattern;
}

}  // namespace bathwright::shifts
