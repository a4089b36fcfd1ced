#include "commands/styles.h"

#include "commands/text_layout.h"

namespace tincture {
namespace {

std::string styled(const std::string& text, const char* code, const Terminal& terminal) {
    return terminal.colour ? std::string("\x1b[") + code + "m" + text + "\x1b[0m" : text;
}

std::string painted(Rgb8 colour, std::size_t columns) {
    return "\x1b[48;2;" + std::to_string(colour.r) + ";" + std::to_string(colour.g) + ";" +
           std::to_string(colour.b) + "m" + std::string(columns, ' ') + "\x1b[0m";
}

}  // namespace

std::string bold(const std::string& text, const Terminal& terminal) {
    return styled(text, "1", terminal);
}
std::string faint(const std::string& text, const Terminal& terminal) {
    return styled(text, "2", terminal);
}

std::size_t width_of(const Terminal& terminal) {
    return static_cast<std::size_t>(terminal.width);
}

bool is_roomy(const Terminal& terminal) {
    return terminal.width >= 68;
}

std::string paragraph(const std::string& text, const Terminal& terminal) {
    return wrapped(std::string(margin, ' '), text, width_of(terminal), margin);
}

std::string remark(const std::string& text, const Terminal& terminal) {
    std::string lines = paragraph(text, terminal);
    lines.pop_back();
    return faint(lines, terminal) + "\n";
}

std::string chip(Rgb8 colour, const Terminal& terminal) {
    if (!terminal.colour) return "";
    return painted(colour, chip_width(terminal) - 1) + " ";
}

std::string chips(Rgb8 left, Rgb8 right, const Terminal& terminal) {
    if (!terminal.colour) return "";
    const std::size_t half = (chip_width(terminal) - 1) / 2;
    return painted(left, half) + painted(right, chip_width(terminal) - 1 - half) + " ";
}

std::size_t chip_width(const Terminal& terminal) {
    return !terminal.colour ? 0 : is_roomy(terminal) ? 7 : 4;
}

}  // namespace tincture
