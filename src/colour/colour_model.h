#pragma once

namespace tincture {

enum class ColourModel { grey, rgb, cmyk };

[[nodiscard]] constexpr int channel_count(ColourModel model) {
    return model == ColourModel::grey ? 1 : model == ColourModel::rgb ? 3 : 4;
}

}  // namespace tincture
