#include "entry_rules.hpp"

#include <fmt/format.h>

#include <nlohmann/json.hpp>
#include <optional>
#include <string>

#include "bathwright/base/letters.hpp"
#include "roll.hpp"

namespace bathwright::logbook {
namespace {

constexpr std::size_t max_text_bytes = 200;
constexpr std::size_t max_body_bytes = std::size_t{1} << 20;

/// The code point of a letter of UTF-8 that is a control character: C0, delete, C1.
std::optional<unsigned> control_character(std::string_view letter) {
  const auto byte = [&](std::size_t i) {
    return static_cast<unsigned>(static_cast<unsigned char>(letter[i]));
  };
  if (letter.size() == 1 && (byte(0) < 0x20 || byte(0) == 0x7F)) return byte(0);
  if (letter.size() == 2 && byte(0) == 0xC2 && byte(1) <= 0x9F) return byte(1);
  return std::nullopt;
}

Problem bad(std::string_view field, std::string what, std::string expected, std::string try_this = {}) {
  return {Fault::bad_input, std::string(field), std::move(what), std::move(expected), std::move(try_this)};
}

bool is_about_a_tank(EntryKind kind) {
  return kind != EntryKind::hand_over && kind != EntryKind::person && kind != EntryKind::setting &&
         kind != EntryKind::failed_pin;
}

bool has_text(const nlohmann::json& json, const char* key) {
  return json.is_object() && json.contains(key) && json[key].is_string() &&
         !json[key].get_ref<const std::string&>().empty();
}

void check_body(const NewEntry& entry, Problems& problems) {
  const std::string& body = entry.body;
  if (body.size() > max_body_bytes) {
    problems.push_back(bad("body", fmt::format("{} bytes", body.size()), "at most 1 MiB (1048576 bytes)",
                           "keep large attachments as files and log their names"));
    return;
  }
  // The parser takes a zero byte for the end of its input and would overlook what follows.
  if (body.find('\0') != std::string::npos || !nlohmann::json::accept(body)) {
    problems.push_back(bad("body", "not valid JSON", "one JSON value in UTF-8"));
    return;
  }
  const auto json = nlohmann::json::parse(body);
  if (entry.kind == EntryKind::correction && !has_text(json, "reason"))
    problems.push_back(bad("body", "a correction without a reason", "the key \"reason\" with a text",
                           "say why the earlier entry is wrong"));
  if (entry.kind == EntryKind::person || entry.kind == EntryKind::setting) {
    Entry told;
    told.kind = entry.kind;
    told.body = body;
    if (const auto understood = Roll().take(told); !understood)
      problems.insert(problems.end(), understood.problems().begin(), understood.problems().end());
  }
  if (entry.kind != EntryKind::slip_closed) return;
  const bool done = has_text(json, "outcome") && json["outcome"] == "done";
  const bool cancelled = has_text(json, "outcome") && json["outcome"] == "cancelled";
  if (!done && !cancelled)
    problems.push_back(bad("body", "a slip closed without saying how",
                           "the key \"outcome\" with \"done\" or \"cancelled\""));
  if (cancelled && !has_text(json, "reason"))
    problems.push_back(
        bad("body", "a slip cancelled without a reason", "the key \"reason\" with a text", "say why"));
}

/// Which kinds answer an earlier entry.
void check_about(const NewEntry& entry, Problems& problems) {
  switch (entry.kind) {
    case EntryKind::correction:
      if (!entry.about)
        problems.push_back(
            bad("about", "a correction that names no entry", "the number of the entry it corrects"));
      break;
    case EntryKind::slip_approved:
    case EntryKind::slip_closed:
      if (!entry.about)
        problems.push_back(bad("about", "no slip named", "the number of the slip it approves or closes"));
      break;
    case EntryKind::addition:
    case EntryKind::dump:  // a slip's first step may take bath out
      break;
    default:
      if (entry.about)
        problems.push_back(
            bad("about", fmt::format("entry {} named by an entry of kind {}", *entry.about, name(entry.kind)),
                "nothing here", "log it as a correction"));
  }
}

}  // namespace

void check_text(std::string_view field, std::string_view text, Presence presence, Problems& problems) {
  if (text.empty() && presence == Presence::required) problems.push_back(bad(field, "empty", "a name"));
  if (text.size() > max_text_bytes)
    problems.push_back(
        bad(field, fmt::format("{} bytes", text.size()), fmt::format("at most {} bytes", max_text_bytes)));
  for (std::size_t at = 0; at < text.size();) {
    const std::size_t length = letter_length(text.substr(at));
    if (length == 0) {
      problems.push_back(bad(field, fmt::format("byte {} is not UTF-8", at), "text in UTF-8"));
      return;
    }
    if (const auto control = control_character(text.substr(at, length))) {
      problems.push_back(bad(field, fmt::format("control character U+{:04X} at byte {}", *control, at),
                             "printable text on one line"));
      return;
    }
    at += length;
  }
}

Problems check(const NewEntry& entry) {
  Problems problems;
  check_text("tank", entry.tank, is_about_a_tank(entry.kind) ? Presence::required : Presence::optional,
             problems);
  check_text("shift", entry.shift, Presence::optional, problems);
  check_text("by", entry.by, Presence::required, problems);
  check_body(entry, problems);
  check_about(entry, problems);
  check_text("bath_type", entry.bath_type, Presence::optional, problems);
  return problems;
}

}  // namespace bathwright::logbook
