// What a file type may hold: a reader asks for its keys one by one, and this helper notes what is missing,
// of the wrong kind, out of range or unknown. Read next: shopfiles/tank_file.cpp, which uses it.
#pragma once

#include <bathwright/base/result.hpp>
#include <bathwright/toml_schema/toml_text.hpp>
#include <map>
#include <optional>
#include <set>
#include <string>
#include <string_view>
#include <vector>


namespace bathwright::toml_schema {

enum class Need { required, optional };
using enum Need;

/// A key, and its value as it would stand in a good file, for messages: {"sample", required, "\"2.00 mL\""}.
struct Key {
  std::string_view name;
  Need need;
  std::string_view example;
};

struct Range {
  double low, high;
};

class Document;

/// One table of a file while it is read. Every question makes its key a known one; keys nobody asked for are
/// reported when the document is concluded. Answers are empty where there is nothing or nothing good.
class Table {
 public:
  std::string text(const Key& key);
  std::optional<double> number(const Key& key, Range range);
  std::optional<double> number(const Key& key);          ///< any that is finite
  bool truth(const Key& key);                            ///< false where it is not given
  std::vector<std::string> texts(const Key& key);        ///< a list of texts
  std::optional<Table> table(const Key& key);            ///< [key] or key = { ... }
  std::vector<Table> tables(const Key& key);             ///< [[key]]
  const Node* any(const Key& key);                       ///< for a key that may hold several kinds
  [[nodiscard]] std::vector<std::string> names() const;  ///< every key, where a file chooses them freely
  [[nodiscard]] bool has(std::string_view name) const;

  /// A number with its unit, read by one of units/read.hpp.
  template <class T>
  std::optional<T> quantity(const Key& key, Result<T> (*read)(std::string_view, std::string_view)) {
    const std::string* written = number_with_unit(key);
    if (!written) return std::nullopt;
    auto value = read(*written, where(key.name));
    if (value) return *std::move(value);
    report(key.name, value.problems());
    return std::nullopt;
  }

  /// As quantity(), and more than zero.
  template <class T>
  std::optional<T> positive(const Key& key, Result<T> (*read)(std::string_view, std::string_view)) {
    const auto value = quantity(key, read);
    if (!value || value->v > 0) return value;
    report(key.name, "is zero", "more than zero, as " + std::string(key.example));
    return std::nullopt;
  }

  /// "baths/n-07.toml:14: vessel.freeboard"; the table's own line where it has no such key, and the table
  /// itself for no name.
  [[nodiscard]] std::string where(std::string_view name) const;
  /// A text as it stands; empty for what is no text.
  [[nodiscard]] std::string written(std::string_view name) const;
  void report(std::string_view name, std::string what, std::string expected, std::string try_this = {});
  void report(std::string_view name, const Problems& problems);
  /// Whether something is wrong with this key already.
  [[nodiscard]] bool reported(std::string_view name) const;

 private:
  friend class Document;
  Table(Document& document, const Node& node, std::string path);
  const Node* find(std::string_view name) const;
  const Node* of_kind(const Key& key, Node::Kind kind, std::string_view expected);
  const std::string* number_with_unit(const Key& key);
  [[nodiscard]] int line(std::string_view name) const;

  Document* document_;
  const Node* node_;
  std::string path_;   // "vessel."; empty for the whole file
  std::size_t visit_;  // in the document's list
};

/// A file being read, and everything wrong with it.
class Document {
 public:
  Document(std::string_view name, Node tree) : name_(name), tree_(std::move(tree)) {}
  Document(const Document&) = delete;
  Document& operator=(const Document&) = delete;

  Table root() { return {*this, tree_, ""}; }

  /// `value`, or every problem of the file, sorted by line.
  template <class T>
  Result<T> conclude(T value) {
    Problems all = problems_by_line();
    if (!all.empty()) return all;
    return value;
  }

 private:
  friend class Table;
  struct Visit {  // a table that was read, and the keys asked for
    const Node* table;
    std::string path;
    std::set<std::string> keys;
  };
  Problems problems_by_line();

  std::string name_;
  Node tree_;
  std::vector<Visit> visits_;             // in the order of reading
  std::multimap<int, Problem> problems_;  // by line
};

}  // namespace bathwright::toml_schema
