// What the library makes of a picture, in process.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "choose/study.h"
#include "colour/rgb.h"
#include "picture/picture.h"

namespace tincture::corpus {

struct Judgement {
    Proposal proposal;
    // At the count asked for; empty where none was, or where the picture has fewer colours.
    std::vector<Rgb8> palette;
    std::vector<std::uint8_t> labels;  // for each pixel an index into the palette
    // With the true inks as the palette: for each pixel an index into these.
    std::vector<std::uint8_t> labels_of_inks;
};

// The way of `tincture reduce`, with its default options; palette and labels as with --count, for
// as many colours as there are `inks`, where there are any. The only place of the corpus that calls
// the pipeline. One thread (see set_thread_count()).
[[nodiscard]] Judgement judge(const Picture& picture, std::span<const Rgb8> inks);

// The swatches of a palette of `count` with --emphasis accent.
[[nodiscard]] std::vector<Rgb8> accent_palette(const Picture& picture, int count);

}  // namespace tincture::corpus
