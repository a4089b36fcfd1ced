// Prints the table of ratios that the documentation quotes: see README.md beside this file.
#include <png.h>

#include <cstdio>
#include <filesystem>
#include <iostream>
#include <memory>
#include <opencv2/core.hpp>
#include <opencv2/imgcodecs.hpp>

#include "cluster/partition.h"
#include "cluster/sweep.h"
#include "histogram/colour_table.h"
#include "measure.h"
#include "photograph.h"
#include "picture/read.h"
#include "support/format.h"

namespace tincture::benchmarks {
namespace {

constexpr int runs = 5;

std::string temporary(const std::string& name) {
    return (std::filesystem::temp_directory_path() / ("tincture-benchmark-" + name)).string();
}

void row(const std::string& what, double value, int decimals, double bound, double goal,
         const std::string& remark) {
    std::cout << "| " << what << " | " << fixed(value, decimals) << " | " << fixed(bound, decimals)
              << " | " << fixed(goal, decimals) << " | " << remark << " |" << std::endl;
}

// The picture to measure on: the named one, or a drawn one of about 20 megapixels.
std::string large_picture(int argc, char** argv, int which) {
    if (argc > which + 1) return argv[which + 1];
    const std::string path = temporary("large-" + std::to_string(which) + ".jpg");
    constexpr int width = 5500;
    constexpr int height = 3700;
    std::vector<std::uint8_t> pixels =
        draw_photograph(width, height, 11 + static_cast<std::uint64_t>(which));
    for (std::size_t i = 0; i < pixels.size(); i += 3)
        std::swap(pixels[i], pixels[i + 2]);  // to BGR
    cv::imwrite(path, cv::Mat(height, width, CV_8UC3, pixels.data()),
                {cv::IMWRITE_JPEG_QUALITY, 88});
    return path;
}

std::string small_picture() {
    const std::string path = temporary("small.jpg");
    std::vector<std::uint8_t> pixels = draw_photograph(640, 480, 5);
    cv::imwrite(path, cv::Mat(480, 640, CV_8UC3, pixels.data()), {cv::IMWRITE_JPEG_QUALITY, 90});
    return path;
}

// An indexed PNG of a picture's size, 16 colours, level 1, as plainly as libpng writes it.
void write_plain_indexed_png(const std::string& path, const cv::Mat& picture) {
    const std::unique_ptr<std::FILE, int (*)(std::FILE*)> file(std::fopen(path.c_str(), "wb"),
                                                               std::fclose);
    png_structp png = png_create_write_struct(PNG_LIBPNG_VER_STRING, nullptr, nullptr, nullptr);
    png_infop info = png_create_info_struct(png);
    png_init_io(png, file.get());
    png_set_IHDR(png, info, static_cast<png_uint_32>(picture.cols),
                 static_cast<png_uint_32>(picture.rows), 4, PNG_COLOR_TYPE_PALETTE,
                 PNG_INTERLACE_NONE, PNG_COMPRESSION_TYPE_DEFAULT, PNG_FILTER_TYPE_DEFAULT);
    png_color palette[16] = {};
    png_set_PLTE(png, info, palette, 16);
    png_set_compression_level(png, 1);
    png_set_filter(png, PNG_FILTER_TYPE_BASE, PNG_FILTER_NONE);
    png_write_info(png, info);
    png_set_packing(png);
    std::vector<png_byte> labels(static_cast<std::size_t>(picture.cols));
    for (int y = 0; y < picture.rows; ++y) {
        const cv::Vec3b* source = picture.ptr<cv::Vec3b>(y);
        for (std::size_t x = 0; x < labels.size(); ++x) labels[x] = source[x][1] >> 4;
        png_write_row(png, labels.data());
    }
    png_write_end(png, info);
    png_destroy_write_struct(&png, &info);
}

void whole_run(const std::string& path, const std::string& name) {
    const std::string out = temporary("out");
    const std::string floor_png = temporary("floor.png");
    std::vector<double> ratios;
    std::vector<double> peaks;
    double decoded = 0;
    for (int i = 0; i < runs; ++i) {
        const double floor = seconds([&] {
            const cv::Mat picture = cv::imread(path, cv::IMREAD_COLOR);
            decoded = static_cast<double>(picture.total() * picture.elemSize());
            write_plain_indexed_png(floor_png, picture);
        });
        const ProgramRun run =
            run_program({TINCTURE_BINARY, "reduce", "--force", "--out", out, "--", path});
        if (run.status != 0) throw std::runtime_error("tincture failed");
        ratios.push_back(run.seconds / floor);
        peaks.push_back(run.peak_bytes);
    }
    row("whole reduce, " + name + ", x the floor", median(ratios), 2, 4, 2,
        "decode with imgcodecs + indexed PNG");
    const double peak = median(peaks);
    row("memory, " + name + ", MB", peak / 1e6, 0, (3 * decoded + 250e6) / 1e6,
        (2 * decoded + 150e6) / 1e6, fixed(decoded / 1e6, 0) + " MB decoded");
    std::filesystem::remove_all(out);
    std::filesystem::remove(floor_png);
}

WeightedPoints points_of_picture(const Picture& picture) {
    return points_of(count_colours(picture, ColourSpace::standard(picture.model)));
}

// OpenCV at 3 counts, other counts from the straight lines between them.
double opencv_seconds(const Picture& picture, double& measured) {
    cv::Mat samples(static_cast<int>(picture.pixel_count()), 3, CV_32F);
    float* out = samples.ptr<float>();
    for (std::size_t i = 0; i < 3 * picture.pixel_count(); ++i) out[i] = picture.samples8[i];
    const cv::TermCriteria criteria(cv::TermCriteria::COUNT, 20, 0);
    const int counts[] = {2, 8, 24};
    double time[3] = {};
    measured = 0;
    for (int i = 0; i < 3; ++i) {
        cv::Mat labels;
        cv::theRNG().state = 1;
        time[i] = seconds(
            [&] { cv::kmeans(samples, counts[i], labels, criteria, 1, cv::KMEANS_PP_CENTERS); });
        measured += time[i];
    }
    double total = 0;
    for (int k = 2; k <= 24; ++k) {
        const int i = k < 8 ? 0 : 1;
        total += time[i] + (time[i + 1] - time[i]) * (k - counts[i]) / (counts[i + 1] - counts[i]);
    }
    return total;
}

void sweep_speed(const std::string& path, const std::string& name) {
    const Picture picture = read_picture(path);
    const WeightedPoints points = points_of_picture(picture);
    std::vector<double> own;
    for (int i = 0; i < runs; ++i) {
        own.push_back(seconds([&] { (void)sweep_counts(points, {}); }));
    }
    double measured = 0;
    const double other = opencv_seconds(picture, measured);
    row("sweep, " + name + ", x faster than OpenCV's kmeans", other / median(own), 0, 300, 1000,
        std::to_string(points.n) + " colours; 3 of 23 counts timed, others interpolated");
}

// Plain Lloyd from a k-means++ start (Arthur, Vassilvitskii 2007), until a pass gains next to
// nothing.
double plain_kmeans(const WeightedPoints& points, int count, cv::RNG& random) {
    Centres centres{3, 0, {}};
    std::vector<double> nearest(points.n, 1);
    for (int k = 0; k < count; ++k) {
        double total = 0;
        for (std::size_t i = 0; i < points.n; ++i) total += points.weight[i] * nearest[i];
        double left = random.uniform(0.0, total);
        std::size_t chosen = 0;
        for (; chosen + 1 < points.n; ++chosen) {
            left -= points.weight[chosen] * nearest[chosen];
            if (left < 0) break;
        }
        for (int d = 0; d < 3; ++d) centres.x.push_back(points.plane(d)[chosen]);
        ++centres.count;
        for (std::size_t i = 0; i < points.n; ++i) {
            double squared = 0;
            for (int d = 0; d < 3; ++d) {
                const double delta =
                    static_cast<double>(points.plane(d)[i] - points.plane(d)[chosen]);
                squared += delta * delta;
            }
            nearest[i] = k == 0 ? squared : std::min(nearest[i], squared);
        }
    }
    double before = 0;
    for (int pass = 0; pass < 300; ++pass) {
        Partition partition(points, count);
        partition.assign(points, centres);
        const double now = partition.objective();
        if (pass > 0 && before - now <= 1e-6 * before) return now;
        before = now;
        for (int k = 0; k < count; ++k) {
            if (partition.empty(k)) continue;
            for (int d = 0; d < 3; ++d) {
                centres.row(k)[d] =
                    static_cast<float>(partition.moment(k, d) / partition.weight(k));
            }
        }
    }
    return before;
}

void sweep_quality(const std::string& path, const std::string& name) {
    const WeightedPoints points = points_of_picture(read_picture(path));
    const Sweep sweep = sweep_counts(points, {});
    cv::RNG random(7);
    double worst = 0;
    int worst_count = 0;
    for (int count = 2; count <= 16; ++count) {
        double best = plain_kmeans(points, count, random);
        for (int start = 1; start < 10; ++start)
            best = std::min(best, plain_kmeans(points, count, random));
        const double ratio = sweep.objective[static_cast<std::size_t>(count - 1)] / best;
        if (ratio > worst) {
            worst = ratio;
            worst_count = count;
        }
    }
    row("evidence_mse, " + name + ", x the best of 10 plain k-means", worst, 4, 1.005, 1.002,
        "worst of counts 2 to 16, at " + std::to_string(worst_count));
}

void small_run() {
    const std::string path = small_picture();
    const std::string out = temporary("small-out");
    std::vector<double> ratios;
    for (int i = 0; i < 4 * runs; ++i) {
        const ProgramRun floor = run_program({DECODE_ONLY_BINARY, path});
        const ProgramRun run =
            run_program({TINCTURE_BINARY, "reduce", "--force", "--out", out, "--", path});
        if (floor.status != 0 || run.status != 0) throw std::runtime_error("a program failed");
        ratios.push_back(run.seconds / floor.seconds);
    }
    row("0.3 megapixels, start to exit, x a program that only decodes", median(ratios), 2, 4, 2,
        "the same libraries linked");
    std::filesystem::remove_all(out);
}

int print_table(int argc, char** argv) {
    std::cout << "| what | measured | bound | goal | |\n|---|---|---|---|---|" << std::endl;
    const int pictures = argc > 1 ? argc - 1 : 2;
    for (int i = 0; i < pictures; ++i) {
        const std::string path = large_picture(argc, argv, i);
        const std::string name = "picture " + std::to_string(i + 1);
        whole_run(path, name);
        sweep_speed(path, name);
        sweep_quality(path, name);
    }
    small_run();
    return 0;
}

}  // namespace
}  // namespace tincture::benchmarks

int main(int argc, char** argv) {
    return tincture::benchmarks::print_table(argc, argv);
}
