#include "output/collisions.h"

#include <sys/stat.h>

#include <algorithm>
#include <cerrno>
#include <system_error>

#include "output/manifest.h"
#include "support/error.h"

namespace tincture {
namespace {

using Path = std::filesystem::path;
using Names = std::set<std::string>;

// Where files are to go.
struct Target {
    const Path& folder;
    const OutputPlan& plan;

    // What `name` is called towards the user.
    [[nodiscard]] Path known(const std::string& name) const { return plan.folder / name; }
    [[nodiscard]] Entry entry(const std::string& name) const {
        return entry_at(folder / name, known(name));
    }
};

void protect_inputs(const Target& target, const std::string& name) {
    for (const Path& input : target.plan.inputs) {
        std::error_code unknown;
        if (!std::filesystem::equivalent(target.folder / name, input, unknown)) continue;
        refuse_output(target.known(name),
                      "is read by this run and would be overwritten or removed");
    }
}

// What --force takes away besides the files of this run: of the files that the previous manifest
// lists, those that are still files, in folders that are no links.
Names removed_by_force(const Target& target) {
    Names removed;
    for (const std::string& name : names_in_manifest(target.folder / manifest_name)) {
        const std::vector<std::string> folders = folders_of(name);
        const bool inside = std::all_of(folders.begin(), folders.end(), [&](const auto& folder) {
            return target.entry(folder) == Entry::folder;
        });
        if (inside && target.entry(name) == Entry::file) removed.insert(name);
    }
    return removed;
}

// Whether a file or link stands where `name` is to go. Throws if something does that cannot give
// way.
bool is_taken(const Target& target, const std::string& name, const Names& removed) {
    for (const std::string& folder : folders_of(name)) {
        const Entry entry = target.entry(folder);
        if (entry == Entry::none || removed.contains(folder)) return false;
        if (entry == Entry::link) refuse_output(target.known(folder), "is a link and no folder");
        if (entry != Entry::folder) refuse_output(target.known(folder), "is a file and no folder");
    }
    const Entry entry = target.entry(name);
    if (entry == Entry::folder) {
        refuse_output(target.known(name), "is a folder where a file has to go");
    }
    if (entry == Entry::other) refuse_output(target.known(name), "is no ordinary file");
    return entry != Entry::none;
}

}  // namespace

void refuse_output(const Path& subject, const std::string& what) {
    throw Error(ErrorKind::output, subject.string(), what + "; choose another folder with --out");
}

void refuse_output(const Path& subject, const std::string& what, int error) {
    const bool full = error == ENOSPC || error == EDQUOT;
    throw Error(ErrorKind::output, subject.string(),
                what + ": " + plain_words(error) + "; " + (full ? "free some space or " : "") +
                    "choose another folder with --out");
}

Entry entry_at(const Path& path, const Path& subject) {
    struct stat status {};
    if (lstat(path.c_str(), &status) != 0) {
        if (errno == ENOENT || errno == ENOTDIR) return Entry::none;
        refuse_output(subject, "cannot be looked at", errno);
    }
    if (S_ISREG(status.st_mode)) return Entry::file;
    if (S_ISLNK(status.st_mode)) return Entry::link;
    return S_ISDIR(status.st_mode) ? Entry::folder : Entry::other;
}

std::vector<std::string> folders_of(const std::string& name) {
    std::vector<std::string> folders;
    for (std::size_t i = name.find('/'); i != std::string::npos; i = name.find('/', i + 1)) {
        folders.push_back(name.substr(0, i));
    }
    return folders;
}

Names what_gives_way(const Path& folder, const OutputPlan& plan, const Names& names) {
    const Target target{folder, plan};
    const Names removed = plan.force ? removed_by_force(target) : Names();
    Names give_way = removed;
    for (const std::string& name : names) {
        if (is_taken(target, name, removed)) give_way.insert(name);
    }
    // Inputs first: nobody must be told that --force would help where it would not.
    for (const std::string& name : give_way) protect_inputs(target, name);
    if (!plan.force && !give_way.empty()) {
        throw Error(ErrorKind::output, target.known(*give_way.begin()).string(),
                    "exists already; choose another folder with --out or give --force");
    }
    return give_way;
}

}  // namespace tincture
