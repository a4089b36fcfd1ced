// The only file that includes CLI11, which takes seconds to compile.
#include "commands/command_line.h"

#include <CLI/CLI.hpp>
#include <charconv>
#include <cmath>

#include "commands/text_layout.h"
#include "support/error.h"
#include "support/text.h"
#include "support/version.h"

namespace tincture {
namespace {

[[noreturn]] void refuse(const std::string& message) {
    throw Error(ErrorKind::usage, "", message);
}

std::uint64_t whole_number(const std::string& option, const std::string& text, std::uint64_t low,
                           std::uint64_t high) {
    std::uint64_t value = 0;
    const auto [end, failure] = std::from_chars(text.data(), text.data() + text.size(), value);
    if (failure != std::errc() || end != text.data() + text.size() || value < low || value > high) {
        refuse(option + " " + shown(text) + ": give a whole number from " + std::to_string(low) +
               " to " + std::to_string(high));
    }
    return value;
}

double positive_number(const std::string& option, const std::string& text, double high) {
    double value = 0;
    const auto [end, failure] = std::from_chars(text.data(), text.data() + text.size(), value);
    if (failure != std::errc() || end != text.data() + text.size() || !(value > 0) ||
        !(value <= high)) {
        refuse(option + " " + shown(text) + ": give a number above 0, at most " +
               std::to_string(static_cast<int>(high)));
    }
    return value;
}

// An empty name is a variable that a script forgot to set.
std::filesystem::path file_name(const std::string& option, const std::string& text) {
    if (text.empty()) refuse(option + " is empty: give a name");
    return text;
}

// Values as they were typed: CLI11 sorts them, the functions above judge them.
struct Typed {
    std::string picture;
    std::optional<std::string> out, threads, count, at_least, at_most, tolerance, evidence,
        emphasis, profile, speck, max_pixels;
    std::vector<std::string> keep;
    CommonOptions common;  // only its flags
};

void add_common_options(CLI::App& command, Typed& typed) {
    command
        .add_option("--out", typed.out,
                    "Folder for the files; default: the picture's name with -tincture, in the "
                    "current folder")
        ->option_text("DIR");
    command.add_flag("--force", typed.common.force,
                     "Overwrite, and remove what an earlier run wrote there");
    command.add_flag("--json", typed.common.json, "Print study.json instead of the summary");
    command.add_flag("--quiet", typed.common.quiet, "Print nothing, show no progress");
    command.add_option("--threads", typed.threads, "How many processors to use; default: all")
        ->option_text("N");
}

void add_choosing_options(CLI::App& command, Typed& typed) {
    command.add_option("--count", typed.count, "Use this many colours; the proposal is still made")
        ->option_text("N");
    command.add_option("--at-least", typed.at_least, "Fewest colours to propose; default: 2")
        ->option_text("N");
    command
        .add_option("--at-most", typed.at_most, "Most colours to propose, at most 256; default: 24")
        ->option_text("N");
    command
        .add_option("--tolerance", typed.tolerance,
                    "CIEDE2000 difference that 95 % of the pixels should stay within; default: 3")
        ->option_text("DE00");
    command
        .add_option("--evidence", typed.evidence,
                    "Which pixels the count is judged on: those of flat areas, where there are "
                    "such (flat, the default), or all of them alike (all)")
        ->option_text("WHICH");
    command
        .add_option("--emphasis", typed.emphasis,
                    "What to look after: areas alone (area), small colours that stand apart as "
                    "well (accent), or these where they do so for certain (auto, the default)")
        ->option_text("WHAT");
    command
        .add_option("--keep", typed.keep,
                    "A colour that must be in the palette: #rrggbb, a CSS name or "
                    "\"lab(L a b)\" (D50); may be repeated")
        ->option_text("COLOUR")
        ->take_all()
        ->expected(1);
}

CommonOptions common_options(const Typed& typed) {
    CommonOptions options = typed.common;
    if (typed.out) options.out = file_name("--out", *typed.out);
    if (typed.threads) {
        options.threads = static_cast<int>(whole_number("--threads", *typed.threads, 1, 1024));
    }
    return options;
}

Emphasis emphasis_of(const std::string& text) {
    if (text == "area") return Emphasis::area;
    if (text == "accent") return Emphasis::accent;
    if (text == "auto") return Emphasis::automatic;
    refuse("--emphasis " + text + ": give area, accent or auto");
}

ChoosingOptions choosing_options(const Typed& typed) {
    ChoosingOptions options;
    const auto count = [](const char* option, const std::string& text) {
        return static_cast<int>(whole_number(option, text, 1, 256));
    };
    if (typed.count) options.count = count("--count", *typed.count);
    if (typed.at_least) options.at_least = count("--at-least", *typed.at_least);
    if (typed.at_most) options.at_most = count("--at-most", *typed.at_most);
    // Asking for one end alone moves the default of the other out of the way.
    if (!typed.at_most) options.at_most = std::max(options.at_most, options.at_least);
    if (!typed.at_least) options.at_least = std::min(options.at_least, options.at_most);
    if (options.at_least > options.at_most) {
        refuse("--at-least " + std::to_string(options.at_least) + " is above --at-most " +
               std::to_string(options.at_most) + ": give a range that rises");
    }
    if (typed.tolerance) {
        options.tolerance = positive_number("--tolerance", *typed.tolerance, 100);
    }
    if (typed.evidence) {
        if (*typed.evidence != "flat" && *typed.evidence != "all") {
            refuse("--evidence " + *typed.evidence + ": give flat or all");
        }
        options.every_pixel_alike = *typed.evidence == "all";
        if (options.every_pixel_alike) options.emphasis = Emphasis::area;
    }
    if (typed.emphasis) options.emphasis = emphasis_of(*typed.emphasis);
    for (const std::string& text : typed.keep) options.keep.push_back(parse_colour(text));
    const int most = options.count.value_or(options.at_most);
    if (options.keep.size() > static_cast<std::size_t>(most)) {
        refuse("--keep names " + std::to_string(options.keep.size()) + " colours, but only " +
               std::to_string(most) + " are allowed: keep fewer, or allow more with " +
               (options.count ? "--count" : "--at-most"));
    }
    return options;
}

ReduceOptions reduce_options(const Typed& typed) {
    ReduceOptions options;
    options.common = common_options(typed);
    options.choosing = choosing_options(typed);
    options.picture = typed.picture;
    if (typed.profile) options.profile = file_name("--profile", *typed.profile);
    if (typed.speck) {
        options.speck =
            static_cast<std::uint32_t>(whole_number("--speck", *typed.speck, 0, 1'000'000'000));
    }
    if (typed.max_pixels) {
        options.max_pixels = whole_number("--max-pixels", *typed.max_pixels, 1, 4'000'000'000);
    }
    return options;
}

// Help for a window of 80 columns, with the command as it is typed.
class HelpText : public CLI::Formatter {
  public:
    explicit HelpText(std::string usage) : usage_(std::move(usage)) {
        label("Positionals", "Picture");
    }

    std::string make_usage(const CLI::App*, std::string) const override {
        return "\nUsage: " + usage_ + "\n";
    }
    std::string make_option(const CLI::Option* option, bool is_positional) const override {
        const std::string name = make_option_name(option, is_positional);
        return entry(name + make_option_opts(option), make_option_desc(option));
    }
    std::string make_subcommand(const CLI::App* command) const override {
        return entry(command->get_name(), command->get_description());
    }

  private:
    static constexpr std::size_t margin = 20;
    static constexpr std::size_t width = 80;

    static std::string entry(const std::string& name, const std::string& description) {
        return wrapped(flush_left("  " + name, margin), description, width, margin);
    }
    std::string usage_;
};

// A library's message on one line, with what the person typed made fit to be shown.
std::string one_line(std::string message) {
    message = shown(message);
    if (message.size() > 1 && message.front() == message.back() &&
        (message.front() == '\'' || message.front() == '"')) {
        message = message.substr(1, message.size() - 2);
    }
    return message;
}

}  // namespace

CommandLine read_command_line(int argc, const char* const* argv) {
    CLI::App app("Decides how few colours a picture needs, and writes it in them.", "tincture");
    bool version = false;
    app.add_flag("--version", version, "Print the version");
    app.set_help_flag("--help", "Print this help");
    app.formatter(std::make_shared<HelpText>("tincture COMMAND [OPTIONS]"));
    app.footer("Each command has its own help: tincture reduce --help");

    Typed typed;
    CLI::App* reduce = app.add_subcommand("reduce", "How many colours, and the picture in them");
    reduce->group("Commands");
    reduce->set_help_flag("--help", "Print this help");
    reduce->formatter(std::make_shared<HelpText>("tincture reduce PICTURE [OPTIONS]"));
    reduce->add_option("PICTURE", typed.picture, "PNG, JPEG, TIFF, WebP, AVIF, BMP or PNM")
        ->option_text(" ");
    add_choosing_options(*reduce, typed);
    reduce
        ->add_option("--profile", typed.profile,
                     "ICC profile for a picture that has none; CMYK needs one")
        ->option_text("FILE");
    reduce
        ->add_option("--speck", typed.speck,
                     "Regions of fewer pixels join a neighbour; default: 3 in flat art, else 0")
        ->option_text("PX");
    reduce
        ->add_option("--max-pixels", typed.max_pixels,
                     "Refuse pictures of more pixels; default: 500000000")
        ->option_text("N");
    add_common_options(*reduce, typed);
    reduce->footer("A screen is no proof: judge colours on a printed one, under D50.");

    try {
        app.parse(argc, argv);
    } catch (const CLI::CallForHelp&) {
        return Answer{(reduce->parsed() ? reduce : &app)->help()};
    } catch (const CLI::ParseError& error) {
        refuse(one_line(error.what()) + "; see tincture --help");
    }
    if (version) return Answer{"tincture " + std::string(tincture_version) + "\n"};
    if (!reduce->parsed()) {
        refuse("say what to do, such as: tincture reduce PICTURE; see tincture --help");
    }
    if (typed.picture.empty()) {
        refuse("name the picture: tincture reduce PICTURE; see tincture reduce --help");
    }
    return reduce_options(typed);
}

}  // namespace tincture
