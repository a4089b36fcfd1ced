// Runs the library on pictures with known answers and prints how often it finds them.
#include <png.h>

#include <algorithm>
#include <atomic>
#include <charconv>
#include <filesystem>
#include <iostream>
#include <mutex>
#include <stdexcept>
#include <string>
#include <string_view>
#include <thread>

#include "support/parallel.h"
#include "tests/corpus/inks.h"
#include "tests/corpus/judge.h"
#include "tests/corpus/results.h"

namespace tincture::corpus {
namespace {

struct Options {
    std::uint64_t first_seed = 1000;
    std::uint64_t last_seed = 1'000'000'000;
    std::vector<Kind> kinds{all_kinds().begin(), all_kinds().end()};
    std::vector<State> states{all_states().begin(), all_states().end()};
    std::uint64_t per_state = 0;  // 0: 200 posters, 100 placards, 20 of each other kind
    bool list_misses = false;
    std::filesystem::path write;
};

constexpr std::uint64_t posters_a_state = 200;
constexpr std::uint64_t placards_a_state = 100;
constexpr std::uint64_t others_a_state = 20;

std::uint64_t number(std::string_view text) {
    std::uint64_t value = 0;
    const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
    if (error != std::errc() || end != text.data() + text.size()) {
        throw std::invalid_argument("not a number: " + std::string(text));
    }
    return value;
}

// Names between commas, each one of `all`.
template <typename T>
std::vector<T> named(std::string_view text, std::span<const T> all) {
    std::vector<T> found;
    while (!text.empty()) {
        const std::string_view name = text.substr(0, text.find(','));
        text.remove_prefix(std::min(text.size(), name.size() + 1));
        const auto match =
            std::find_if(all.begin(), all.end(), [&](T one) { return name_of(one) == name; });
        if (match == all.end()) throw std::invalid_argument("unknown: " + std::string(name));
        found.push_back(*match);
    }
    return found;
}

Options read_options(std::span<char* const> words) {
    Options options;
    for (std::size_t i = 0; i < words.size(); ++i) {
        const std::string_view word = words[i];
        if (word == "--list-misses") {
            options.list_misses = true;
            continue;
        }
        if (i + 1 == words.size())
            throw std::invalid_argument("nothing after " + std::string(word));
        const std::string_view value = words[++i];
        if (word == "--seeds") {
            const std::size_t dots = value.find("..");
            options.first_seed = number(value.substr(0, dots));
            options.last_seed =
                dots == value.npos ? options.first_seed : number(value.substr(dots + 2));
        } else if (word == "--kinds") {
            options.kinds = named(value, all_kinds());
        } else if (word == "--states") {
            options.states = named(value, all_states());
        } else if (word == "--per-state") {
            options.per_state = number(value);
        } else if (word == "--write") {
            options.write = value;
        } else {
            throw std::invalid_argument("unknown option " + std::string(word));
        }
    }
    return options;
}

void write_png(const std::filesystem::path& path, const Picture& picture) {
    png_image image{};
    image.version = PNG_IMAGE_VERSION;
    image.width = picture.width;
    image.height = picture.height;
    image.format = PNG_FORMAT_RGB;
    if (png_image_write_to_file(&image, path.c_str(), 0, picture.samples8.data(), 0, nullptr) ==
        0) {
        throw std::runtime_error("cannot write " + path.string() + ": " + image.message);
    }
}

// The picture in the palette and labels of the true count.
Picture relabelled(const Picture& picture, const Judgement& judgement) {
    Picture out = copy_of(picture);
    for (std::size_t i = 0; i < judgement.labels.size(); ++i) {
        const Rgb8 colour = judgement.palette[judgement.labels[i]];
        out.samples8[3 * i] = colour.r;
        out.samples8[3 * i + 1] = colour.g;
        out.samples8[3 * i + 2] = colour.b;
    }
    return out;
}

void measure(Result& result, const Sample& sample, const Picture& picture,
             const Judgement& judgement) {
    std::vector<std::uint8_t> got = nearest_inks(judgement.palette, sample.inks);
    std::vector<std::uint8_t> got_inks;
    for (const std::uint8_t label : judgement.labels) got_inks.push_back(got[label]);
    result.halo = halo_share(sample, got_inks);
    result.palette_errors = palette_errors(sample, judgement.palette);
    result.strokes = tally_strokes(sample, got_inks);
    result.strokes_at_best = tally_strokes(sample, labels_of_those_near(sample, picture));
    result.halo_of_inks = halo_share(sample, judgement.labels_of_inks);
}

void measure_accent(Result& result, const Sample& sample, const Picture& picture) {
    const std::vector<Rgb8> palette = accent_palette(picture, 6);
    for (const Rgb8 colour : palette) {
        const double away = difference(colour, *sample.accent);
        result.accent_error = std::min(result.accent_error.value_or(away), away);
    }
}

Results run_picture(const Options& options, Kind kind, std::uint64_t seed) {
    const Sample sample = draw_sample(kind, seed);
    Results results;
    for (const State state : options.states) {
        const Picture picture = worn(sample.picture, state, seed);
        // Where a picture fades, or is half as large, no pixel's label is known.
        const bool labels = kind != Kind::fade && keeps_size(state);
        const Judgement judgement =
            judge(picture, labels ? std::span<const Rgb8>(sample.inks) : std::span<const Rgb8>());
        Result result;
        result.kind = kind;
        result.state = state;
        result.seed = seed;
        result.truth = sample.count();
        result.proposal = judgement.proposal;
        if (!judgement.labels.empty()) measure(result, sample, picture, judgement);
        if (sample.accent) measure_accent(result, sample, picture);
        if (!options.write.empty()) {
            const std::string stem =
                name_of(kind) + "-" + std::to_string(seed) + "-" + name_of(state);
            write_png(options.write / (stem + ".png"), picture);
            if (!judgement.labels.empty()) {
                write_png(options.write / (stem + "-labels.png"), relabelled(picture, judgement));
            }
        }
        results.push_back(std::move(result));
    }
    return results;
}

Results run_all(const Options& options) {
    struct Task {
        Kind kind;
        std::uint64_t seed;
    };
    std::vector<Task> tasks;
    for (const Kind kind : options.kinds) {
        const std::uint64_t usual = kind == Kind::poster    ? posters_a_state
                                    : kind == Kind::placard ? placards_a_state
                                                            : others_a_state;
        const std::uint64_t n = options.per_state > 0 ? options.per_state : usual;
        for (std::uint64_t i = 0; i < n && options.first_seed + i <= options.last_seed; ++i) {
            tasks.push_back({kind, options.first_seed + i});
        }
    }
    std::vector<Results> found(tasks.size());
    std::atomic<std::size_t> next = 0;
    std::mutex failing;
    std::exception_ptr failure;
    std::vector<std::jthread> threads;
    for (unsigned t = 0; t < std::max(1U, std::thread::hardware_concurrency()); ++t) {
        threads.emplace_back([&] {
            try {
                for (std::size_t i = next++; i < tasks.size(); i = next++) {
                    found[i] = run_picture(options, tasks[i].kind, tasks[i].seed);
                }
            } catch (...) {
                const std::lock_guard lock(failing);
                failure = std::current_exception();
                next = tasks.size();
            }
        });
    }
    threads.clear();
    if (failure) std::rethrow_exception(failure);
    Results all;
    for (Results& results : found) {
        std::move(results.begin(), results.end(), std::back_inserter(all));
    }
    return all;
}

}  // namespace
}  // namespace tincture::corpus

int main(int argc, char** argv) {
    using namespace tincture::corpus;
    try {
        const Options options = read_options({argv + 1, argv + argc});
        if (!options.write.empty()) std::filesystem::create_directories(options.write);
        tincture::set_thread_count(1);  // a picture a thread
        const Results results = run_all(options);
        print_summary(std::cout, results);
        print_counts(std::cout, results);
        print_labels(std::cout, results);
        print_calibration(std::cout, results);
        print_stability(std::cout, results);
        print_unnatural(std::cout, results);
        print_accents(std::cout, results);
        if (options.list_misses) print_misses(std::cout, results);
    } catch (const std::exception& error) {
        std::cerr << "corpus: " << error.what() << '\n';
        return 1;
    }
}
