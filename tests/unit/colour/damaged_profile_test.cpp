// Whatever bytes are called a colour profile: an error of the input or sane colours, nothing else.
#include <gtest/gtest.h>

#include <cmath>

#include "colour/colour_space.h"
#include "support/error.h"
#include "tests/support/profiles.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Bytes;
using test_support::Random;

// Opens a profile and puts colours through it both ways; true if that was no error.
bool survives(const Bytes& icc, ColourModel model) {
    try {
        const ColourSpace space = ColourSpace::from_icc(icc, model, "picture");
        const auto channels = static_cast<std::size_t>(channel_count(model));
        std::vector<float> device;
        for (std::size_t i = 0; i < 16 * channels; ++i) {
            device.push_back(static_cast<float>(i % 7) / 6.0F);
        }
        std::vector<float> L(16), a(16), b(16);
        space.to_lab(device.data(), 16, {L.data(), a.data(), b.data()});
        for (std::size_t i = 0; i < 16; ++i) {
            for (const float value : {L[i], a[i], b[i]}) {
                EXPECT_LT(std::abs(value), 501);
                EXPECT_EQ(static_cast<double>(value) * lab_steps_per_unit,
                          std::floor(static_cast<double>(value) * lab_steps_per_unit));
            }
            if (space.is_writable()) (void)space.to_rgb8({L[i], a[i], b[i]});
        }
        return true;
    } catch (const Error& error) {
        EXPECT_EQ(error.kind(), ErrorKind::input);
        EXPECT_EQ(error.subject(), "picture");
        return false;
    }
}

struct Whole {
    Bytes icc;
    ColourModel model;
};

std::vector<Whole> whole_profiles() {
    return {{test_support::wide_gamut_profile(), ColourModel::rgb},
            {test_support::rgb_table_profile(), ColourModel::rgb},
            {test_support::cmyk_profile(), ColourModel::cmyk},
            {test_support::grey_profile(), ColourModel::grey}};
}

TEST(DamagedProfile, NoBytesAtAll) {
    for (const ColourModel model : {ColourModel::grey, ColourModel::rgb, ColourModel::cmyk}) {
        EXPECT_FALSE(survives({}, model));
    }
}

TEST(DamagedProfile, CutOffAnywhere) {
    for (const Whole& whole : whole_profiles()) {
        ASSERT_TRUE(survives(whole.icc, whole.model));
        for (std::size_t size = 0; size + 4 < whole.icc.size(); size += size < 400 ? 1 : 37) {
            const Bytes cut(whole.icc.begin(),
                            whole.icc.begin() + static_cast<std::ptrdiff_t>(size));
            if (size < 132) {
                EXPECT_FALSE(survives(cut, whole.model)) << size;
            } else {
                (void)survives(cut, whole.model);
            }
        }
        const Bytes half(whole.icc.begin(),
                         whole.icc.begin() + static_cast<std::ptrdiff_t>(whole.icc.size() / 2));
        EXPECT_FALSE(survives(half, whole.model));
    }
}

TEST(DamagedProfile, RandomBytes) {
    Random random(8);
    for (const std::size_t size : {1U, 4U, 127U, 128U, 132U, 500U, 5000U}) {
        for (int i = 0; i < 20; ++i) {
            Bytes bytes(size);
            for (std::uint8_t& byte : bytes) byte = static_cast<std::uint8_t>(random.bits());
            EXPECT_FALSE(survives(bytes, ColourModel::rgb));
            // With a header that looks right up to the table of tags.
            const Bytes whole = test_support::wide_gamut_profile();
            std::copy_n(whole.begin(), std::min<std::size_t>(size, 128), bytes.begin());
            (void)survives(bytes, ColourModel::rgb);
        }
    }
}

TEST(DamagedProfile, AFewBytesChanged) {
    Random random(9);
    for (const Whole& whole : whole_profiles()) {
        for (int i = 0; i < 300; ++i) {
            Bytes bytes = whole.icc;
            // Most of what matters lies near the start.
            const std::size_t reach = random.below(2) == 0 ? bytes.size() : 700;
            for (std::size_t changes = 1 + random.below(3); changes > 0; --changes) {
                const std::size_t at = random.below(std::min(reach, bytes.size()));
                bytes[at] = random.below(3) == 0 ? 0xFF : static_cast<std::uint8_t>(random.bits());
            }
            (void)survives(bytes, whole.model);
        }
    }
}

}  // namespace
}  // namespace tincture
