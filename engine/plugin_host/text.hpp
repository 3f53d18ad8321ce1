// Text that came from a plugin: is it text at all?
#pragma once

#include <string>
#include <string_view>

namespace bathwright::plugin_host {

/// What is wrong with it, or empty: not UTF-8, a control character.
[[nodiscard]] std::string fault_of_text(std::string_view text);

/// Lower-case letters, digits and '-', beginning with a letter.
[[nodiscard]] bool is_id(std::string_view text);

/// Numbers joined by dots: "1.0.0".
[[nodiscard]] bool is_dotted_version(std::string_view text);

}  // namespace bathwright::plugin_host
