#include "histogram/lab_cells.h"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <map>

#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::Random;
using Steps = std::array<std::int64_t, 3>;

// Lab of the opaque pixels in steps of 2^-14.
std::vector<Steps> steps_of(const Picture& picture, const ColourSpace& space) {
    const std::size_t n = picture.pixel_count();
    std::vector<float> L(n), a(n), b(n);
    picture_to_lab(picture, space, 0, n, {L.data(), a.data(), b.data()});
    std::vector<Steps> steps;
    for (std::size_t i = 0; i < n; ++i) {
        if (!test_support::is_opaque(picture, i)) continue;
        const auto step = [](float x) { return std::llround(static_cast<double>(x) * 16384); };
        steps.push_back({step(L[i]), step(a[i]), step(b[i])});
    }
    return steps;
}

struct PlainCell {
    std::int64_t count = 0;
    Steps moment{};
};

// Cells by plain division, pixel by pixel.
std::map<Steps, PlainCell> plain_cells(const std::vector<Steps>& pixels, std::int64_t edge) {
    std::map<Steps, PlainCell> cells;
    for (const Steps& pixel : pixels) {
        Steps cell{};
        for (std::size_t d = 0; d < 3; ++d) {
            cell[d] = static_cast<std::int64_t>(
                std::floor(static_cast<double>(pixel[d]) / static_cast<double>(edge)));
        }
        ++cells[cell].count;
        for (std::size_t d = 0; d < 3; ++d) cells[cell].moment[d] += pixel[d];
    }
    return cells;
}

// The sum over pixels of the squared distance to a centre, and the same from cells.
double error_of_pixels(const std::vector<Steps>& pixels, const std::array<double, 3>& centre) {
    double sum = 0;
    for (const Steps& pixel : pixels) {
        for (std::size_t d = 0; d < 3; ++d) {
            const double delta = static_cast<double>(pixel[d]) / 16384 - centre[d];
            sum += delta * delta;
        }
    }
    return sum;
}

double error_of_cells(const ColourTable& table, const std::array<double, 3>& centre) {
    double sum = table.inner_scatter;
    for (std::size_t i = 0; i < table.size(); ++i) {
        const std::array<float, 3> mean = {table.L[i], table.a[i], table.b[i]};
        for (std::size_t d = 0; d < 3; ++d) {
            const double delta = static_cast<double>(mean[d]) - centre[d];
            sum += static_cast<double>(table.count[i]) * delta * delta;
        }
    }
    return sum;
}

void expect_cells(const ColourTable& table, const std::vector<Steps>& pixels) {
    const auto edge = static_cast<std::int64_t>(table.cell_de * 16384);
    const std::map<Steps, PlainCell> wanted = plain_cells(pixels, edge);
    ASSERT_EQ(table.size(), wanted.size());
    EXPECT_EQ(table.opaque_pixels, pixels.size());
    std::size_t i = 0;
    for (const auto& [cell, sums] : wanted) {  // both ascend by cell
        ASSERT_EQ(table.count[i], static_cast<std::uint64_t>(sums.count));
        const std::array<float, 3> mean = {table.L[i], table.a[i], table.b[i]};
        for (std::size_t d = 0; d < 3; ++d) {
            const double exact =
                static_cast<double>(sums.moment[d]) / static_cast<double>(sums.count);
            EXPECT_NEAR(static_cast<double>(mean[d]) * 16384, exact, 0.5001);
        }
        ++i;
    }
    for (std::size_t k = 1; k < table.size(); ++k) EXPECT_LT(table.key[k - 1], table.key[k]);
    const std::array<std::array<double, 3>, 3> centres = {{{50, 0, 0}, {10, -80, 90}, {61, 3, 14}}};
    for (const std::array<double, 3>& centre : centres) {
        const double exact = error_of_pixels(pixels, centre);
        EXPECT_NEAR(error_of_cells(table, centre), exact, 1e-6 * exact);
    }
}

Picture test_picture(Random& random) {
    Picture picture = test_support::photograph_like(random, 16, {211, 157});
    test_support::punch_holes(picture, random);
    return picture;
}

TEST(LabCells, HoldThePixels) {
    Random random(21);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_picture(random);
    const std::vector<Steps> pixels = steps_of(picture, space);
    const ColourTable finest = count_lab_cells(picture, space);
    EXPECT_EQ(finest.cell_de, finest_cell_de);
    expect_cells(finest, pixels);
    for (const std::size_t max_cells : {5000U, 700U, 60U, 9U, 1U}) {
        SCOPED_TRACE(max_cells);
        const ColourTable table = count_lab_cells(picture, space, max_cells);
        EXPECT_LE(table.size(), std::max<std::size_t>(8, max_cells));
        EXPECT_GT(table.cell_de, finest_cell_de);
        expect_cells(table, pixels);
    }
}

TEST(LabCells, AreNoCoarserThanNeedBe) {
    Random random(22);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_picture(random);
    const std::vector<Steps> pixels = steps_of(picture, space);
    const ColourTable table = count_lab_cells(picture, space, 300);
    const auto edge = static_cast<std::int64_t>(table.cell_de * 16384);
    EXPECT_LE(table.size(), 300U);
    EXPECT_GT(plain_cells(pixels, edge / 2).size(), 300U);
}

void expect_equal(const ColourTable& one, const ColourTable& two) {
    EXPECT_EQ(one.key, two.key);
    EXPECT_EQ(one.L, two.L);
    EXPECT_EQ(one.a, two.a);
    EXPECT_EQ(one.b, two.b);
    EXPECT_EQ(one.count, two.count);
    EXPECT_EQ(one.cell_de, two.cell_de);
    EXPECT_EQ(one.inner_scatter, two.inner_scatter);
}

// More pixels than are read at a time, so that cells are doubled on the way.
TEST(LabCells, OrderAndThreadsHaveNoSay) {
    Random random(23);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    Picture picture = test_support::photograph_like(random, 8, {600, 450});
    test_support::punch_holes(picture, random);
    const Picture mixed = test_support::shuffled_pixels(picture, random);
    for (const std::size_t max_cells : {100'000U, 500U}) {
        set_thread_count(1);
        const ColourTable wanted = count_lab_cells(picture, space, max_cells);
        for (const int threads : {2, 3, 7}) {
            set_thread_count(threads);
            expect_equal(count_lab_cells(picture, space, max_cells), wanted);
            expect_equal(count_lab_cells(mixed, space, max_cells), wanted);
        }
        set_thread_count(0);
    }
}

TEST(LabCells, StandInWhereThereAreTooManyColours) {
    Random random(24);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_picture(random);
    const ColourTable table = count_colours(picture, space, 100);
    EXPECT_EQ(table.cell_de, finest_cell_de);
    expect_cells(table, steps_of(picture, space));
}

TEST(LabCells, OtherModels) {
    Random random(25);
    const test_support::Bytes icc = test_support::cmyk_profile();
    const ColourSpace cmyk = ColourSpace::from_icc(icc, ColourModel::cmyk, "");
    const Picture inks =
        test_support::noise_picture(random, ColourModel::cmyk, 16, {70, 60}, 65536);
    expect_cells(count_colours(inks, cmyk, 10), steps_of(inks, cmyk));
    const ColourSpace grey = ColourSpace::standard(ColourModel::grey);
    const Picture greys =
        test_support::noise_picture(random, ColourModel::grey, 16, {70, 60}, 65536);
    expect_cells(count_colours(greys, grey, 10), steps_of(greys, grey));
}

}  // namespace
}  // namespace tincture
