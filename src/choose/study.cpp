#include "choose/study.h"

#include <algorithm>
#include <stdexcept>

namespace tincture {
namespace {

template <typename Entry>
const Entry& entry_of(const std::vector<Entry>& entries, int count) {
    const auto found = std::find_if(entries.begin(), entries.end(),
                                    [count](const Entry& entry) { return entry.count == count; });
    if (found == entries.end()) {
        throw std::out_of_range("the study holds no count of " + std::to_string(count));
    }
    return *found;
}

}  // namespace

const CurvePoint& curve_at(const Study& study, int count) {
    return entry_of(study.curve, count);
}

const Palette& palette_at(const Study& study, int count) {
    return entry_of(study.palettes, count);
}

}  // namespace tincture
