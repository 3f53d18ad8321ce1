#include <bathwright/shopfiles/additions_file.hpp>

#include "schema.hpp"

namespace bathwright::shopfiles {

Result<std::vector<WrittenAddition>> read_additions_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  std::vector<WrittenAddition> additions;
  for (Table& entry : root.tables({"addition", required, "one [[addition]] for each chemical"})) {
    WrittenAddition one;
    one.chemical = entry.text({"chemical", required, "\"boric-acid\""});
    one.amount = entry.text({"amount", required, "\"4 kg\""});
    one.where = entry.where("amount");
    additions.push_back(std::move(one));
  }
  return file.conclude(std::move(additions));
}

Result<std::vector<WrittenAddition>> read_additions(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_additions_text(path, *text);
}

}  // namespace bathwright::shopfiles
