#include <toml++/toml.h>
#include <algorithm>
#include <bathwright/plugin_host/allow_list.hpp>
#include <sstream>

#include "private_file.hpp"

namespace bathwright::plugin_host {
namespace {

constexpr std::size_t hash_digits = 64;

bool is_sha256(std::string_view text) {
  return text.size() == hash_digits && text.find_first_not_of("0123456789abcdef") == std::string_view::npos;
}

std::string text_of(const toml::table& row, std::string_view key) { return row[key].value_or(std::string()); }

}  // namespace

Result<AllowList> AllowList::read(const std::filesystem::path& file) try {
  std::error_code failed;
  if (!std::filesystem::exists(std::filesystem::symlink_status(file, failed))) return AllowList{};
  const auto content = read_private(file);
  if (!content) return content.problems();
  const auto unreadable = [&](const std::string& what) {
    return Problem{Fault::bad_input, file.string(), what,
                   "[[plugin]] tables with sha256, as this program writes them",
                   "Remove the file and allow your plugins again: bathwright plugins allow FILE."};
  };
  AllowList list;
  const toml::table document = toml::parse(*content);
  const toml::array* rows = document["plugin"].as_array();
  if (!rows) return document.empty() ? Result<AllowList>(list) : unreadable("has no table of plugins");
  for (const toml::node& node : *rows) {
    const toml::table* row = node.as_table();
    if (!row || !is_sha256(text_of(*row, "sha256"))) return unreadable("has a plugin without a SHA-256");
    list.add({text_of(*row, "sha256"), text_of(*row, "file"), text_of(*row, "id"), text_of(*row, "author"),
              text_of(*row, "licence")});
  }
  return list;
} catch (const toml::parse_error& error) {
  return Problem{Fault::bad_input, file.string() + ':' + std::to_string(error.source().begin.line),
                 std::string(error.description()), "", "Remove the file and allow your plugins again."};
}

bool AllowList::holds(const std::string& sha256) const {
  return std::ranges::count(all_, sha256, &Allowed::sha256) > 0;
}

void AllowList::add(Allowed plugin) {
  remove(plugin.sha256);
  all_.push_back(std::move(plugin));
}

void AllowList::remove(const std::string& sha256) {
  std::erase_if(all_, [&](const Allowed& a) { return a.sha256 == sha256; });
}

Outcome AllowList::write(const std::filesystem::path& file) const {
  std::ostringstream text;
  text << "# Bath types that may run on this account, by the SHA-256 of their file. Written by\n"
          "# bathwright plugins allow and bathwright plugins forget; only sha256 counts.\n";
  toml::array rows;
  for (const Allowed& a : all_)
    rows.push_back(toml::table{
        {"sha256", a.sha256}, {"file", a.file}, {"id", a.id}, {"author", a.author}, {"licence", a.licence}});
  if (!rows.empty()) text << toml::table{{"plugin", std::move(rows)}} << '\n';
  return write_private(file, text.str());
}

std::filesystem::path allow_list_file(const std::filesystem::path& data) {
  return data / "plugins.allow.toml";
}

}  // namespace bathwright::plugin_host
