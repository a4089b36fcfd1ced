// Table, walls and floor of the room: what they look like.
#include "numbers.h"
#include "render.h"

namespace tincture::samples {
namespace {

constexpr double plank = 15.5;

struct Board {
    std::int64_t number;
    double across;  // from the middle of its edge to the next, 0 to 1
};

Board board_at(double z) {
    const double at = (z + 200) / plank;
    return {static_cast<std::int64_t>(at), at - std::floor(at)};
}

bool is_table(const Room& room, Vec p, Vec normal) {
    return normal.y > 0.5 && p.y > room.low.y + 1;
}

// 0 to 1: how dark the grain of the board is.
double grain(Vec p, const Board& board) {
    const double offset = 37.0 * static_cast<double>(board.number);
    const double bend = 1.1 * fractal_noise(p.x * 0.030 + offset, p.z * 0.16, 0, 3, 71);
    const double rings = p.z * 0.62 + bend * 2.6 + offset;
    const double within = rings - std::floor(rings);
    const double late = smooth_step(0.25, 0.95, within) * smooth_step(1.0, 0.96, within);
    const double streak = fractal_noise(p.x * 0.10 + offset, p.z * 3.4, 0, 4, 72);
    return clamp01(0.42 + 0.34 * (late - 0.4) + 0.42 * streak);
}

double pores(Vec p) {
    return smooth_step(0.30, 0.62, noise(p.x * 0.75, p.z * 13, 0, 73)) *
           smooth_step(-0.25, 0.35, noise(p.x * 0.2, p.z * 1.5, 0, 74));
}

double gap(const Board& board) {
    const double edge = std::min(board.across, 1 - board.across) * plank;
    return smooth_step(0.14, 0.03, edge);
}

Surface wood(Vec p) {
    const Board board = board_at(p.z);
    const double tone = cell_value(board.number, 0, 0, 75) - 0.5;
    Vec colour = mixed({0.33, 0.185, 0.095}, {0.115, 0.055, 0.026}, grain(p, board));
    colour *= 1 + 0.34 * tone;
    colour *= 1 - 0.45 * pores(p);
    colour *= 1 - 0.93 * gap(board);
    const double worn = fractal_noise(p.x * 0.06, p.z * 0.09, 0, 4, 76);
    return {colour, gap(board) > 0.5 ? 0.0 : 0.042, 0.36 + 0.10 * worn + 0.15 * pores(p), 0};
}

Surface plaster(Vec p) {
    const double cloud = fractal_noise(p.x * 0.018, p.y * 0.024, p.z * 0.018, 5, 77);
    const double fine = fractal_noise(p.x * 0.25, p.y * 0.25, p.z * 0.25, 4, 78);
    const Vec colour = mixed({0.30, 0.335, 0.32}, {0.45, 0.46, 0.42}, 0.5 + 0.75 * cloud);
    return {colour * (1 + 0.07 * fine), 0, 1, 0};
}

}  // namespace

bool Room::through_pane(double y, double z) const {
    if (y < window_low || y > window_high || z < window_back || z > window_front) return false;
    const auto within_pane = [](double t, int panes) { return t * panes - std::floor(t * panes); };
    const double high_cell = (window_high - window_low) / panes_up;
    const double wide_cell = (window_front - window_back) / panes_across;
    const double v =
        within_pane((y - window_low) / (window_high - window_low), panes_up) * high_cell;
    const double u =
        within_pane((z - window_back) / (window_front - window_back), panes_across) * wide_cell;
    return v > bar / 2 && v < high_cell - bar / 2 && u > bar / 2 && u < wide_cell - bar / 2;
}

Surface Room::surface(Vec p, Vec normal) const {
    if (is_table(*this, p, normal)) return wood(p);
    if (normal.z > 0.5) return plaster(p);
    if (normal.y > 0.5) return {{0.28, 0.21, 0.15}, 0, 1, 0};
    if (normal.y < -0.5 && p.y < 1) return {{0.10, 0.06, 0.035}, 0, 1, 0};
    return {{0.60, 0.57, 0.51}, 0, 1, 0};
}

double Room::relief(Vec p, Vec normal) const {
    if (is_table(*this, p, normal)) {
        const Board board = board_at(p.z);
        const double dents = 0.010 * fractal_noise(p.x * 0.35, p.z * 0.5, 0, 3, 79);
        return dents - 0.012 * pores(p) - 0.10 * gap(board) - 0.006 * grain(p, board);
    }
    if (normal.z > 0.5) {
        return 0.10 * fractal_noise(p.x * 0.10, p.y * 0.12, 0, 4, 80) +
               0.018 * fractal_noise(p.x * 0.9, p.y * 0.9, 0, 3, 81);
    }
    return 0;
}

}  // namespace tincture::samples
