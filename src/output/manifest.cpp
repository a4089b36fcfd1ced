#include "output/manifest.h"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <nlohmann/json.hpp>
#include <set>

#include "support/text.h"

namespace tincture {
namespace {

constexpr std::size_t largest_manifest = 16U << 20U;  // bytes; a run of 100,000 files needs 7 MB

// The bytes of a regular file, or nothing; never waits, as it would for a pipe.
std::string read_regular_file(const std::filesystem::path& path) {
    const int file = open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NOFOLLOW | O_NONBLOCK);
    if (file < 0) return {};
    std::string text;
    struct stat status {};
    bool good = fstat(file, &status) == 0 && S_ISREG(status.st_mode);
    while (good) {
        std::array<char, 65536> block;
        const ssize_t count = read(file, block.data(), block.size());
        if (count < 0 && errno == EINTR) continue;
        if (count == 0) break;
        good = count > 0 && text.size() <= largest_manifest;
        if (good) text.append(block.data(), static_cast<std::size_t>(count));
    }
    close(file);
    return good ? text : std::string();
}

bool is_output_part(std::string_view part) {
    return !part.empty() && part.front() != '.';
}

}  // namespace

bool is_output_name(std::string_view name) {
    if (name.find('\0') != std::string_view::npos || valid_utf8(name) != name) return false;
    for (;;) {
        const std::size_t slash = name.find('/');
        if (!is_output_part(name.substr(0, slash))) return false;
        if (slash == std::string_view::npos) return true;
        name.remove_prefix(slash + 1);
    }
}

std::string manifest_text(std::string_view version, std::string_view command,
                          const std::map<std::string, std::uint64_t>& bytes_of_file) {
    nlohmann::ordered_json files = nlohmann::ordered_json::array();
    for (const auto& [name, bytes] : bytes_of_file) {
        files.push_back({{"name", name}, {"bytes", bytes}});
    }
    const nlohmann::ordered_json manifest = {
        {"tincture", version}, {"command", command}, {"files", std::move(files)}};
    return manifest.dump(2) + "\n";
}

std::vector<std::string> names_in_manifest(const std::filesystem::path& path) {
    const auto manifest = nlohmann::json::parse(read_regular_file(path), nullptr, false);
    if (!manifest.is_object() || !manifest.contains("tincture") || !manifest.contains("files") ||
        !manifest["files"].is_array()) {
        return {};
    }
    std::set<std::string> names;
    for (const auto& file : manifest["files"]) {
        if (!file.is_object() || !file.contains("name") || !file["name"].is_string()) return {};
        const auto name = file["name"].get<std::string>();
        if (!is_output_name(name)) return {};
        names.insert(name);
    }
    return {names.begin(), names.end()};
}

}  // namespace tincture
