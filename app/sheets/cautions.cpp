#include <bathwright/sheets/cautions.hpp>

namespace bathwright::sheets {
namespace {

/// A caution ends in its deferral, where it has one.
std::string_view without_deferral(std::string_view caution) {
  const std::size_t decides = caution.find("licensed practice decide");
  if (decides == std::string_view::npos) return caution;
  const std::size_t start = caution.substr(0, decides).rfind("The supplier's ");
  if (start == std::string_view::npos) return caution;
  const std::string_view own = caution.substr(0, start);
  return own.substr(0, own.find_last_not_of(' ') + 1);
}

}  // namespace

Section cautions(const std::vector<std::string>& all) {
  Section section{"Cautions", {}};
  for (const std::string& caution : all)
    if (const auto text = without_deferral(caution); !text.empty())
      section.blocks.emplace_back(Paragraph{std::string(text)});
  return section;
}

}  // namespace bathwright::sheets
