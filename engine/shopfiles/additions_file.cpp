#include <bathwright/shopfiles/additions_file.hpp>
#include <bathwright/units/read.hpp>

#include "schema.hpp"

namespace bathwright::shopfiles {

Result<WrittenAdditions> read_additions_text(std::string_view name, std::string_view text) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  WrittenAdditions written;
  written.take_out =
      root.positive({"take_out", optional, R"("120 L")"}, units::read_volume).value_or(written.take_out);
  for (Table& entry : root.tables({"addition", required, "one [[addition]] for each chemical"})) {
    WrittenAddition one;
    one.chemical = entry.text({"chemical", required, "\"boric-acid\""});
    one.amount = entry.text({"amount", required, "\"4 kg\""});
    one.where = entry.where("amount");
    written.additions.push_back(std::move(one));
  }
  return file.conclude(std::move(written));
}

Result<WrittenAdditions> read_additions(const std::string& path) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_additions_text(path, *text);
}

}  // namespace bathwright::shopfiles
