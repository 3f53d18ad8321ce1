#include <bathwright/described/bath_type_file.hpp>
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <filesystem>

#include "indicator.hpp"
#include "statement.hpp"

namespace bathwright::described {

Result<bath::BathType> read_bath_type_text(std::string_view name, std::string_view text) {
  auto tree = toml_schema::parse_toml(name, text);
  if (!tree) return tree.problems();
  toml_schema::Document file(name, *std::move(tree));
  Statement statement(file.root());
  std::vector<plugin_host::Place> places;
  auto read = plugin_host::read_bath_type(statement.stated(), &places);
  if (!read) {
    statement.report(places, read.problems());
    return file.conclude(bath::BathType{});
  }
  bath::BathType type = *std::move(read);
  for (std::size_t i = 0; i < type.indicators.size(); ++i) {
    bath::Indicator& indicator = type.indicators[i];
    indicator.evaluate = evaluator(type.id + ' ' + indicator.id, statement.values()[i], type.quantities);
  }
  return file.conclude(std::move(type));
}

Result<bath::BathType> read_bath_type_file(const std::string& path) {
  const auto text = toml_schema::read_text_file(path);
  if (!text) return text.problems();
  auto type = read_bath_type_text(path, *text);
  if (type && std::filesystem::path(path).filename() != type->id + ".bathtype.toml")
    return Problem{Fault::bad_input, path, "holds the bath type '" + type->id + "'",
                   "the file name " + type->id + ".bathtype.toml", "Rename the file, or change its id."};
  return type;
}

}  // namespace bathwright::described
