#include "output/json_text.h"

#include <cstddef>
#include <nlohmann/json.hpp>

namespace tincture {
namespace {

using Json = nlohmann::ordered_json;

std::string one_line(const Json& value) {
    return value.dump(-1, ' ', false, Json::error_handler_t::replace);
}

bool holds_objects(const Json& value) {
    if (!value.is_structured()) return false;
    for (const Json& member : value) {
        if (member.is_object() || holds_objects(member)) return true;
    }
    return false;
}

void write(const Json& value, std::size_t indent, std::string& text) {
    constexpr std::size_t line_width = 200;
    if (!value.is_structured() || value.empty() || !holds_objects(value)) {
        const std::string line = one_line(value);
        if (!value.is_structured() || line.size() <= line_width) {
            text += line;
            return;
        }
    }
    const bool object = value.is_object();
    const std::string margin(indent + 2, ' ');
    text += object ? "{\n" : "[\n";
    bool first = true;
    for (auto member = value.begin(); member != value.end(); ++member) {
        if (!first) text += ",\n";
        first = false;
        text += margin;
        if (object) text += one_line(Json(member.key())) + ": ";
        write(*member, indent + 2, text);
    }
    text += '\n' + std::string(indent, ' ') + (object ? '}' : ']');
}

}  // namespace

std::string json_text(const Json& value) {
    std::string text;
    write(value, 0, text);
    return text + '\n';
}

}  // namespace tincture
