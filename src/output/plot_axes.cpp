#include "output/plot_axes.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>
#include <initializer_list>

#include "support/format.h"
#include "support/maths.h"

namespace tincture {
namespace {

constexpr double foot_height = 26;  // pixels from the logarithmic part down to the foot
constexpr double least_tick_distance = 15;

double log10_plain(double value) {
    constexpr double ln_10 = 2.302585092994046;
    return natural_log(value) / ln_10;
}

// 1, 2 or 5 times a power of ten; steps count from 1, three to a decade.
double round_value(int step) {
    constexpr std::array<int, 3> digits = {1, 2, 5};
    const int decade = step >= 0 ? step / 3 : -((2 - step) / 3);
    double value = digits[static_cast<std::size_t>(step - 3 * decade)];
    for (int i = 0; i < decade; ++i) value *= 10;
    for (int i = 0; i > decade; --i) value /= 10;
    return value;
}

int step_below(double value) {
    int step = 24;
    while (step > -24 && round_value(step) > value) --step;
    return step;
}

int decimals_of(int step) {
    return step >= 0 ? 0 : (2 - step) / 3;
}

}  // namespace

LogAxis::LogAxis(std::span<const double> values, double floor, double top, double bottom)
    : top_(top), bottom_(bottom), floor_(floor) {
    double smallest = 0;
    double largest = 0;
    bool all_zero = true;
    for (const double value : values) {
        if (!(value >= floor)) {
            broken_ = true;
            all_zero = all_zero && value == 0;
            continue;
        }
        smallest = smallest == 0 ? value : std::min(smallest, value);
        largest = std::max(largest, value);
    }
    if (largest == 0) smallest = largest = 1;
    constexpr double spare = 1.2;
    small_ = smallest / spare;
    large_ = largest * spare;
    constexpr double least_ratio = 6;
    if (large_ < small_ * least_ratio) {
        const double widen = std::sqrt(small_ * least_ratio / large_);
        small_ /= widen;
        large_ *= widen;
    }
    lowest_ = broken_ ? bottom - foot_height : bottom;
    if (!all_zero) {
        foot_ = '<';
        const int step = step_below(floor);
        foot_ += fixed(round_value(step), decimals_of(step));
    }
}

double LogAxis::position(double value) const {
    if (!(value >= floor_)) return bottom_;
    const double part = log10_plain(value / small_) / log10_plain(large_ / small_);
    return rounded(lowest_ + (top_ - lowest_) * std::clamp(part, 0.0, 1.0), 2);
}

double LogAxis::break_position() const {
    return bottom_ - foot_height / 2;
}

std::vector<AxisTick> LogAxis::ticks() const {
    const int low = step_below(small_) / 3 * 3 - 3;
    const double decade = (lowest_ - top_) / log10_plain(large_ / small_);
    // Values of every so many decades; none where two of them would stand `closest` of a decade
    // apart and that is too little.
    const auto of_digits = [&](std::initializer_list<double> digits, double closest, int decades) {
        std::vector<AxisTick> ticks;
        if (closest * decade < least_tick_distance) return ticks;
        for (int step = low - low % (3 * decades) - 3 * decades; round_value(step) <= large_;
             step += 3 * decades) {
            for (const double digit : digits) {
                const double value = digit * round_value(step);
                if (value < small_ || value > large_) continue;
                const int decimals = decimals_of(step) + (digit == 1.5 && step <= 0 ? 1 : 0);
                ticks.push_back({position(value), fixed(value, decimals)});
            }
        }
        return ticks;
    };
    constexpr std::size_t few = 4;
    std::vector<AxisTick> ticks = of_digits({1, 2, 5}, 0.301, 1);
    if (ticks.size() < few) {
        const auto more = of_digits({1, 1.5, 2, 3, 5, 7}, 0.124, 1);
        if (!more.empty()) ticks = more;
    }
    for (int decades = 1; ticks.empty() && decades < 4; ++decades) {
        ticks = of_digits({1}, decades, decades);
    }
    if (broken_) ticks.insert(ticks.begin(), {bottom_, foot_});
    return ticks;
}

CountAxis::CountAxis(std::span<const int> counts, double left, double right)
    : first_(counts.front()), last_(counts.front()), alone_position_(right - 24) {
    for (const int count : counts) {
        if (count > last_ + 1) alone_ = count;
        if (count == last_ + 1) last_ = count;
    }
    constexpr int most_linear = 60;
    constexpr double spare_end = 16;
    constexpr double alone_room = 84;
    logarithmic_ = last_ - first_ > most_linear;
    left_ = left + spare_end;
    right_ = right - (alone_ ? alone_room : spare_end);
    if (last_ - first_ < 4) {  // a few counts stand together instead of at the far ends
        const double spare = (right_ - left_) * (4 - (last_ - first_)) / 10;
        left_ += spare;
        right_ -= spare;
    }
}

double CountAxis::scaled(double count) const {
    return logarithmic_ ? log10_plain(count) : count;
}

double CountAxis::position(double count) const {
    if (alone_ && count > last_ + 1) return alone_position_;
    if (last_ == first_) return rounded((left_ + right_) / 2 + (count - first_) * 60, 2);
    const double part = (scaled(count) - scaled(first_)) / (scaled(last_) - scaled(first_));
    return rounded(left_ + (right_ - left_) * part, 2);
}

std::optional<double> CountAxis::break_position() const {
    if (!alone_) return std::nullopt;
    return rounded((right_ + alone_position_) / 2, 2);
}

std::vector<AxisTick> CountAxis::ticks(int marked) const {
    constexpr double label_room = 24;  // for three digits
    std::vector<int> shown;
    const auto offer = [&](int count) {
        if (count != alone_.value_or(0) && (count < first_ || count > last_)) return;
        const auto near = [&](int other) {
            return std::abs(position(other) - position(count)) < label_room;
        };
        if (std::none_of(shown.begin(), shown.end(), near)) shown.push_back(count);
    };
    offer(marked);
    if (alone_) offer(*alone_);
    offer(first_);
    if (logarithmic_) {
        for (const int count : {1, 10, 100, 2, 5, 20, 50, 200, 3, 7, 30, 70, 150, 4, 15, 40, 256}) {
            offer(count);
        }
    } else {
        const double gap = last_ == first_ ? label_room : position(first_ + 1) - position(first_);
        const int step = gap >= label_room ? 1 : gap * 2 >= label_room ? 2 : 5;
        const int start = step == 1 ? first_ : step;
        for (int count = start; count <= last_; count += step) offer(count);
    }
    std::sort(shown.begin(), shown.end());
    std::vector<AxisTick> ticks;
    for (const int count : shown) ticks.push_back({position(count), std::to_string(count)});
    return ticks;
}

}  // namespace tincture
