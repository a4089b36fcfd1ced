// Writing the pictures. All throw std::runtime_error.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

namespace tincture::samples {

// `rgba` has four bytes a pixel; without `alpha` every fourth is left out. Marked as sRGB.
void write_png(const std::string& path, int width, int height,
               const std::vector<std::uint8_t>& rgba, bool alpha, double dpi);

// Three bytes a pixel, sRGB, no subsampling of chroma.
void write_jpeg(const std::string& path, int width, int height,
                const std::vector<std::uint8_t>& rgb, int quality, int dpi);

// A GeoTIFF (OGC 19-008r4) of 16-bit samples, band by band within each pixel.
struct Scene {
    int width;
    int height;
    std::vector<std::string> bands;  // their names
    std::vector<std::uint16_t> samples;
    double left;         // easting of the upper left corner, metres
    double top;          // northing of it
    double pixel;        // metres
    std::uint16_t epsg;  // code of the projected coordinate reference system
};
void write_geotiff(const std::string& path, const Scene& scene);

}  // namespace tincture::samples
