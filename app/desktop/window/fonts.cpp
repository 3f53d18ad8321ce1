#include "fonts.hpp"

#include <fontconfig/fontconfig.h>

#include <memory>
#include <string>

namespace bathwright::desktop {
namespace {

struct Release {
  void operator()(FcConfig* config) const { FcConfigDestroy(config); }
  void operator()(FcPattern* pattern) const { FcPatternDestroy(pattern); }
};

constexpr const char* family = "Noto Sans";
constexpr const char* mono_family = "Noto Sans Mono";

/// The file of a family's regular or bold face; empty where only another family is there.
std::string font_file(FcConfig* config, const char* wanted_family, bool bold) {
  const std::unique_ptr<FcPattern, Release> wanted(FcPatternCreate());
  FcPatternAddString(wanted.get(), FC_FAMILY, reinterpret_cast<const FcChar8*>(wanted_family));
  FcPatternAddInteger(wanted.get(), FC_WEIGHT, bold ? FC_WEIGHT_BOLD : FC_WEIGHT_REGULAR);
  FcPatternAddInteger(wanted.get(), FC_SLANT, FC_SLANT_ROMAN);
  FcConfigSubstitute(config, wanted.get(), FcMatchPattern);
  FcDefaultSubstitute(wanted.get());
  FcResult result = FcResultMatch;
  const std::unique_ptr<FcPattern, Release> found(FcFontMatch(config, wanted.get(), &result));
  FcChar8 *file = nullptr, *name = nullptr;
  if (!found || FcPatternGetString(found.get(), FC_FILE, 0, &file) != FcResultMatch ||
      FcPatternGetString(found.get(), FC_FAMILY, 0, &name) != FcResultMatch)
    return {};
  return std::string(reinterpret_cast<const char*>(name)) == wanted_family
             ? reinterpret_cast<const char*>(file)
             : "";
}

/// Latin, Greek, the marks of text, sub- and superscripts, arrows, signs of comparison.
constexpr ImWchar letters[] = {0x0020, 0x017F, 0x0370, 0x03FF, 0x2010, 0x2044, 0x2070, 0x209F, 0x20AC,
                               0x20AC, 0x2190, 0x2193, 0x2212, 0x2212, 0x2248, 0x2265, 0};

}  // namespace

Result<Fonts> load_fonts(float scale) {
  const std::unique_ptr<FcConfig, Release> config(FcInitLoadConfigAndFonts());
  const std::string regular = config ? font_file(config.get(), family, false) : "",
                    bold = config ? font_file(config.get(), family, true) : "",
                    mono = config ? font_file(config.get(), mono_family, false) : "";
  if (regular.empty() || bold.empty() || mono.empty())
    return Problem{Fault::io, "fonts",
                   std::string("the font ") + (mono.empty() ? mono_family : family) + " is not installed", "",
                   "Install the packages fonts-noto-core and fonts-noto-mono, or use the command line: "
                   "bathwright --help."};
  ImFontAtlas& atlas = *ImGui::GetIO().Fonts;
  atlas.Clear();
  const auto load = [&](const std::string& file, float px) {
    return atlas.AddFontFromFileTTF(file.c_str(), px * scale, nullptr, letters);
  };
  Fonts fonts;
  fonts.body = load(regular, body_px);  // the first one is the default
  fonts.caption = load(regular, caption_px);
  fonts.bold = load(bold, body_px);
  fonts.mono = load(mono, caption_px);
  fonts.heading = load(bold, heading_px);
  fonts.large = load(regular, large_px);
  if (!atlas.Build())
    return Problem{Fault::io, regular, "cannot be read as a font", "", "Install fonts-noto-core again."};
  return fonts;
}

}  // namespace bathwright::desktop
