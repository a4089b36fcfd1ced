// The pictures; each function draws one and writes it to `path`.
#pragma once

#include <string>

namespace tincture::samples {

void draw_poster(const std::string& path);
void draw_label(const std::string& path);
void draw_photograph(const std::string& path);
void draw_scene(const std::string& path);

}  // namespace tincture::samples
