#include "cluster/nearest.h"

#include <gtest/gtest.h>

#include "tests/support/points.h"
#include "tests/support/targets.h"

namespace tincture {
namespace {

using test_support::Random;

struct Found {
    std::vector<std::uint16_t> label;
    std::vector<float> squared;
    std::vector<float> second;
    bool operator==(const Found&) const = default;
};

// The first `n` points from `start` on; nothing behind them may be written.
Found vector_form(const WeightedPoints& points, std::size_t start, std::size_t n,
                  const Centres& centres) {
    Found found{std::vector<std::uint16_t>(n + 1, 9999), std::vector<float>(n + 1, -1.0F),
                std::vector<float>(n + 1, -1.0F)};
    std::vector<const float*> planes;
    for (int d = 0; d < points.dims; ++d) planes.push_back(points.plane(d) + start);
    nearest_centres({planes.data(), points.dims, n}, centres, found.label.data(),
                    found.squared.data());
    Found two = found;
    nearest_two_centres({planes.data(), points.dims, n}, centres, two.label.data(),
                        two.squared.data(), two.second.data());
    EXPECT_EQ(found.label, two.label);
    EXPECT_EQ(found.squared, two.squared);
    EXPECT_EQ(two.label[n], 9999);
    EXPECT_EQ(two.squared[n], -1.0F);
    EXPECT_EQ(two.second[n], -1.0F);
    two.label.pop_back();
    two.squared.pop_back();
    two.second.pop_back();
    return two;
}

Found plain_form(const WeightedPoints& points, std::size_t start, std::size_t n,
                 const Centres& centres) {
    Found found;
    for (std::size_t i = start; i < start + n; ++i) {
        const test_support::Nearest nearest = test_support::plain_nearest(points, i, centres);
        found.label.push_back(nearest.label);
        found.squared.push_back(nearest.squared);
        // The second nearest is the nearest of the others.
        Centres others = centres;
        const auto row = others.x.begin() + nearest.label * others.dims;
        others.x.erase(row, row + others.dims);
        --others.count;
        found.second.push_back(
            others.count == 0 ? 3.0e38F : test_support::plain_nearest(points, i, others).squared);
    }
    return found;
}

// Points on a coarse lattice are often equally near to several centres.
WeightedPoints lattice(Random& random, std::size_t n, int dims) {
    test_support::Rows rows(n, std::vector<double>(static_cast<std::size_t>(dims)));
    for (std::vector<double>& row : rows) {
        for (double& x : row) x = static_cast<double>(random.below(5)) - 2;
    }
    return test_support::points_from(rows, std::vector<double>(n, 1.0));
}

void check(const WeightedPoints& points, std::size_t start, std::size_t n, const Centres& centres) {
    const Found wanted = plain_form(points, start, n, centres);
    EXPECT_GE(test_support::for_each_instruction_set([&](const std::string& name) {
                  EXPECT_TRUE(vector_form(points, start, n, centres) == wanted)
                      << name << " " << points.dims << " dimensions, " << n << " points, "
                      << centres.count << " centres";
              }),
              2);
}

TEST(NearestCentres, AnyNumberOfPoints) {
    Random random(51);
    for (const int dims : {1, 3, 5, 16}) {
        const WeightedPoints points =
            test_support::cloud_points(random, {.n = 80, .dims = dims, .spread = 30});
        const Centres centres = test_support::points_as_centres(points, 7, random);
        for (std::size_t n = 0; n <= 70; ++n) check(points, n % 9, n, centres);
    }
}

TEST(NearestCentres, AnyNumberOfCentres) {
    Random random(52);
    for (const int dims : {1, 3, 5, 16}) {
        const WeightedPoints points =
            test_support::cloud_points(random, {.n = 5003, .dims = dims, .spread = 30});
        for (const int count : {1, 2, 3, 4, 5, 8, 16, 24, 25, 255, 256, 257}) {
            // Few points where there are many centres, for the time that it takes.
            const std::size_t n = count > 25 ? 777 : 5000;
            check(points, 3, n, test_support::points_as_centres(points, count, random));
        }
    }
    const WeightedPoints points = test_support::cloud_points(random, {.n = 5000});
    check(points, 0, 5000, test_support::points_as_centres(points, 257, random));
}

TEST(NearestCentres, TheFirstOfEquallyNearOnes) {
    Random random(53);
    for (const int dims : {1, 3, 5, 16}) {
        const WeightedPoints points = lattice(random, 500, dims);
        for (const int count : {2, 10, 100}) {
            check(points, 0, 500, test_support::points_as_centres(points, count, random));
        }
        // All centres the same.
        Centres centres = test_support::points_as_centres(points, 1, random);
        for (int k = 1; k < 20; ++k) {
            centres.x.insert(centres.x.end(), centres.row(0), centres.row(0) + dims);
        }
        centres.count = 20;
        const Found found = vector_form(points, 0, 500, centres);
        EXPECT_EQ(found.label, std::vector<std::uint16_t>(500, 0));
    }
}

TEST(NearestCentres, ManyCentres) {
    Random random(54);
    const WeightedPoints points =
        test_support::cloud_points(random, {.n = 65'536, .dims = 1, .spread = 300});
    const Centres centres{1, 65'536, points.x};
    const WeightedPoints few = test_support::last_points(points, 65'500);
    check(few, 0, few.n, centres);
}

}  // namespace
}  // namespace tincture
