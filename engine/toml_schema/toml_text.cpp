#include <bathwright/toml_schema/toml_text.hpp>

#include <fmt/format.h>
#include <toml++/toml.h>

#include <algorithm>
#include <bathwright/base/letters.hpp>
#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <optional>

namespace bathwright::toml_schema {
namespace {

// The TOML library frees a tree by recursion, one step a level, and a tree cannot be deeper than the text has
// dots and opening brackets. So many steps fit any stack; a real file has a few hundred.
constexpr std::ptrdiff_t most_dots_and_brackets = 4000;

bool is_control(char c) { return (c >= 0 && c < 0x20) || c == 0x7f; }

int line_of(std::string_view text, std::size_t position) {
  return 1 + static_cast<int>(
                 std::count(text.begin(), text.begin() + static_cast<std::ptrdiff_t>(position), '\n'));
}

// What would be a nuisance or a danger to parse.
std::optional<Problem> unfit(std::string_view name, std::string_view text) {
  const std::string whole{name};
  if (text.size() > longest_file_bytes) {
    return Problem{Fault::bad_input, whole, "is larger than 1 MiB", "a file of a few kilobytes", ""};
  }
  if (const auto zero = text.find('\0'); zero != text.npos) {
    return Problem{Fault::bad_input, at_line(name, line_of(text, zero)),
                   "a zero byte: this is not a text file", "a text file in UTF-8",
                   "Save it as plain text, UTF-8."};
  }
  if (std::ranges::count_if(text, [](char c) { return c == '.' || c == '[' || c == '{'; }) >
      most_dots_and_brackets) {
    return Problem{Fault::bad_input, whole,
                   fmt::format("more than {} dots and brackets", most_dots_and_brackets),
                   "a file nested three levels at most", ""};
  }
  return std::nullopt;
}

std::string iso_8601(const toml::date& date) {
  return fmt::format("{:04}-{:02}-{:02}", date.year, date.month, date.day);
}

// Two digits a field: "2026-03-02T05:40:00".
std::string iso_8601(const toml::date_time& moment) {
  return fmt::format("{}T{:02}:{:02}:{:02}", iso_8601(moment.date), moment.time.hour, moment.time.minute,
                     moment.time.second);
}

class Converter {
 public:
  explicit Converter(std::string_view name) : name_(name) {}

  Node convert(const toml::node& from, std::string key, int line, int depth) {
    Node node;
    node.line = line;
    node.key = std::move(key);
    if (node.key.size() > longest_key_bytes)
      refuse(node, "is too long a key", "a key of up to 100 characters");
    if (depth > deepest_nesting) {
      refuse(node, "is nested too deep", "no table or list within the fifth");
      return node;
    }
    if (const auto* table = from.as_table()) {
      for (const auto& [name, item] : *table) {
        node.items.push_back(
            convert(item, std::string(name.str()), static_cast<int>(name.source().begin.line), depth + 1));
      }
      std::ranges::stable_sort(node.items, {}, &Node::line);
    } else if (const auto* list = from.as_array()) {
      node.kind = Node::Kind::list;
      for (const auto& item : *list) {
        node.items.push_back(convert(item, "", static_cast<int>(item.source().begin.line), depth + 1));
      }
    } else {
      set_value(node, from);
    }
    return node;
  }

  Problems problems;

 private:
  void set_value(Node& node, const toml::node& from) {
    if (const auto* text = from.as_string()) {
      node.kind = Node::Kind::text;
      node.text = text->get();
      if (node.text.size() > longest_text_bytes) refuse(node, "is too long a text", "up to 1000 characters");
      if (std::ranges::any_of(node.text, is_control))
        refuse(node, "holds control characters", "text on one line");
    } else if (from.is_number()) {
      node.kind = Node::Kind::number;
      node.number =
          from.is_integer() ? static_cast<double>(from.as_integer()->get()) : from.as_floating_point()->get();
    } else if (from.is_boolean()) {
      node.kind = Node::Kind::truth;
      node.truth = from.as_boolean()->get();
    } else {
      node.kind = Node::Kind::moment;
      const auto* moment = from.as_date_time();
      if (moment && !moment->get().offset) node.text = iso_8601(moment->get());
      if (const auto* date = from.as_date()) node.text = iso_8601(date->get());
    }
  }

  void refuse(const Node& node, std::string what, std::string expected) {
    problems.push_back({Fault::bad_input, at_line(name_, node.line),
                        (node.key.empty() ? "an item" : printable(node.key)) + ' ' + std::move(what),
                        std::move(expected), ""});
  }

  std::string_view name_;
};

}  // namespace

std::string at_line(std::string_view name, int line) { return fmt::format("{}:{}", name, line); }

std::string printable(std::string_view text) {
  constexpr std::size_t longest = 60;  // a message is one line
  std::string shown(whole_letters(text, longest));
  std::ranges::replace_if(shown, is_control, '?');
  return shown.size() < text.size() ? shown + "..." : shown;
}

Result<std::string> read_text_file(const std::string& path, std::size_t longest) {
  std::error_code ignored;
  if (std::filesystem::is_directory(path, ignored)) {
    return Problem{Fault::io, path, "is a folder", "a file", "Name the file in it."};
  }
  std::ifstream file(path, std::ios::binary);
  if (!file) {
    return Problem{Fault::io, path, std::string("cannot be opened: ") + std::strerror(errno),
                   "a file to read", "Check the path."};
  }
  std::string text;
  for (std::size_t got = 1; got > 0 && text.size() <= longest;) {
    const std::size_t before = text.size();
    text.resize(std::min(longest + 1, before + longest_file_bytes));
    file.read(text.data() + before, static_cast<std::streamsize>(text.size() - before));
    got = static_cast<std::size_t>(file.gcount());
    text.resize(before + got);
  }
  if (file.bad()) return Problem{Fault::io, path, "cannot be read to its end", "", ""};
  return text;
}

Result<Node> parse_toml(std::string_view name, std::string_view text) {
  if (const auto problem = unfit(name, text)) return *problem;
  try {
    const toml::table root = toml::parse(text, name);
    if (root.empty()) {
      return Problem{Fault::bad_input, at_line(name, 1), "holds no key at all",
                     "keys, as the README.md for this kind of file lists them", ""};
    }
    Converter converter(name);
    Node tree = converter.convert(root, "", 1, 0);
    if (!converter.problems.empty()) return converter.problems;
    return tree;
  } catch (const toml::parse_error& error) {
    return Problem{Fault::bad_input, at_line(name, static_cast<int>(error.source().begin.line)),
                   "cannot be read as TOML: " + std::string(error.description()), "",
                   "Texts stand in quotes; numbers have a decimal point and no unit."};
  }
}

}  // namespace bathwright::toml_schema
