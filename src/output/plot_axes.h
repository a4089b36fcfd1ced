// The axes of the curve drawing: where a value or a count lies, and which of them get a label.
#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

namespace tincture {

struct AxisTick {
    double position;  // in pixels
    std::string words;
};

// An upright logarithmic axis with a little room at both ends. What lies below `floor` has no place
// on it and stands on the foot of the axis, below a break.
class LogAxis {
  public:
    // For values of at least 0; `top` and `bottom` in pixels, top < bottom.
    LogAxis(std::span<const double> values, double floor, double top, double bottom);

    [[nodiscard]] double position(double value) const;
    [[nodiscard]] bool is_broken() const { return broken_; }
    [[nodiscard]] double break_position() const;

    // 1, 2 and 5 times the powers of ten where they stand 15 pixels apart, else fewer, and more
    // where these are under four; the foot below a break is "0", or "<0.01" where not all is 0
    // there.
    [[nodiscard]] std::vector<AxisTick> ticks() const;

  private:
    double top_;
    double bottom_;  // of the drawing
    double lowest_;  // pixel of the smallest value on the logarithmic part
    double floor_;
    double small_ = 0.1;  // ends of the logarithmic part
    double large_ = 1;
    bool broken_ = false;
    std::string foot_ = "0";
};

// The axis of counts. Counts follow one another, but the last may stand alone: then it comes after
// a break. Linear; logarithmic where there are more than 60 counts.
class CountAxis {
  public:
    // `counts` rise, from 1 or more, and are not empty.
    CountAxis(std::span<const int> counts, double left, double right);

    [[nodiscard]] double position(double count) const;
    [[nodiscard]] bool is_logarithmic() const { return logarithmic_; }
    [[nodiscard]] std::optional<double> break_position() const;

    // The last count before a break.
    [[nodiscard]] int last() const { return last_; }

    // Whole counts with room for their labels; `marked` is among them if it is on the axis.
    [[nodiscard]] std::vector<AxisTick> ticks(int marked) const;

  private:
    [[nodiscard]] double scaled(double count) const;

    int first_;
    int last_;
    std::optional<int> alone_;
    bool logarithmic_;
    double left_;
    double right_;  // of the counts that follow one another
    double alone_position_;
};

}  // namespace tincture
