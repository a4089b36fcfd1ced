// JSON as text that people can read too.
#pragma once

#include <nlohmann/json_fwd.hpp>
#include <string>

namespace tincture {

// UTF-8 JSON in the order given: what fits stays on one line, the rest is indented by two spaces;
// ends with a line break. Bytes that are no UTF-8 become U+FFFD, numbers that are not finite null.
[[nodiscard]] std::string json_text(const nlohmann::ordered_json& value);

}  // namespace tincture
