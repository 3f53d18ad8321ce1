// Bytes as lower-case hexadecimal digits, as they stand in the log.
#pragma once

#include <string>
#include <string_view>

namespace bathwright::logbook {

[[nodiscard]] std::string hex(std::string_view bytes);

/// The bytes of `digits`; empty where they are not hexadecimal or not `bytes` of them.
[[nodiscard]] std::string bytes_of_hex(std::string_view digits, std::size_t bytes);

}  // namespace bathwright::logbook
