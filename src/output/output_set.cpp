#include "output/output_set.h"

#include <sys/stat.h>

#include <cerrno>
#include <cstdint>
#include <cstdlib>
#include <map>
#include <stdexcept>
#include <system_error>
#include <utility>
#include <vector>

#include "output/collisions.h"
#include "output/manifest.h"
#include "support/cancel.h"
#include "support/error.h"
#include "support/text.h"

namespace tincture {
namespace {

using Path = std::filesystem::path;
using Names = std::set<std::string>;

Path absolute_folder(const Path& folder) {
    if (folder.empty()) refuse_output(folder, "the output folder has no name");
    std::error_code error;
    Path target = std::filesystem::absolute(folder, error);
    if (!error) target = std::filesystem::weakly_canonical(target, error);
    if (error) refuse_output(folder, "cannot be used as output folder", error.value());
    return target.has_filename() ? target : target.parent_path();
}

// `target` or the nearest folder above it that exists.
Path nearest_folder(const Path& target, const Path& subject) {
    for (Path path = target;; path = path.parent_path()) {
        struct stat status {};
        if (stat(path.c_str(), &status) == 0) {
            if (S_ISDIR(status.st_mode)) return path;
            refuse_output(subject,
                          path == target ? "is a file and no folder" : "lies below a file");
        }
        if (errno != ENOENT && errno != ENOTDIR) {
            refuse_output(subject, "cannot be used as output folder", errno);
        }
        if (entry_at(path, subject) != Entry::none) {
            refuse_output(subject, "is or lies below a link that leads nowhere");
        }
    }
}

// Steps that can be taken back.
class Steps {
  public:
    explicit Steps(const FileCalls& calls) : calls_(calls) {}

    // Both return 0 or an errno value.
    int move(const Path& from, const Path& to) {
        return take({from, to}, [&] { return calls_.move(from, to); });
    }
    int make_folder(const Path& folder) {
        return take({{}, folder}, [&] { return calls_.make_folder(folder); });
    }

    // The last step first. False if one of them could not be taken back.
    [[nodiscard]] bool undo() {
        bool good = true;
        for (auto step = done_.rbegin(); step != done_.rend(); ++step) {
            const int error = step->from.empty() ? calls_.remove_folder(step->to)
                                                 : calls_.move(step->to, step->from);
            good = good && error == 0;
        }
        done_.clear();
        return good;
    }

  private:
    struct Step {
        Path from;  // empty: the folder `to` was made
        Path to;
    };

    int take(Step step, const std::function<int()>& call) {
        // Room first: memory that runs out after the call would lose the step.
        if (done_.size() == done_.capacity()) done_.reserve(2 * done_.size() + 16);
        const int error = call();
        if (error == 0) done_.push_back(std::move(step));
        return error;
    }

    const FileCalls& calls_;
    std::vector<Step> done_;
};

// What lies in the staging folder: names and bytes.
std::map<std::string, std::uint64_t> staged_files(const Path& staged, const Path& subject) {
    std::map<std::string, std::uint64_t> files;
    try {
        for (const auto& entry : std::filesystem::recursive_directory_iterator(staged)) {
            const std::string name = entry.path().lexically_relative(staged).generic_string();
            const auto type = entry.symlink_status().type();
            if (type == std::filesystem::file_type::directory) continue;
            if (type != std::filesystem::file_type::regular || !is_output_name(name)) {
                refuse_output(subject / name, "was staged and is no output file");
            }
            files[name] = entry.file_size();
        }
    } catch (const std::filesystem::filesystem_error& error) {
        refuse_output(subject, "cannot be written", error.code().value());
    }
    return files;
}

// The folders of `name` below `base`, as far as they are missing. `subject` is what base is called.
void make_folders(const Path& base, const std::string& name, const Path& subject,
                  const std::function<int(const Path&)>& make_folder) {
    for (const std::string& folder : folders_of(name)) {
        const int error = make_folder(base / folder);
        if (error == 0) continue;
        if (error == EEXIST && entry_at(base / folder, subject / folder) == Entry::folder) continue;
        refuse_output(subject / folder, "cannot be made", error);
    }
}

// Where there is no output folder yet: the folders above it, then the whole of it.
void put_whole(Steps& steps, const Path& staged, const Path& target, const Path& subject) {
    Path above = nearest_folder(target, subject);
    for (const Path& part : target.parent_path().lexically_relative(above)) {
        if (part == ".") continue;
        above /= part;
        const int error = steps.make_folder(above);
        if (error != 0) refuse_output(subject, "cannot be made", error);
    }
    const int error = steps.move(staged, target);
    if (error != 0) refuse_output(subject, "cannot be made", error);
}

void put_aside(Steps& steps, const FileCalls& calls, const Path& target, const Path& aside,
               const Names& give_way, const Path& subject) {
    for (const std::string& name : give_way) {
        make_folders(aside, name, subject, calls.make_folder);
        const int error = steps.move(target / name, aside / name);
        if (error != 0) refuse_output(subject / name, "cannot be replaced", error);
    }
}

void put_in(Steps& steps, const Path& staged, const Path& target,
            const std::vector<std::string>& names, const Path& subject) {
    for (const std::string& name : names) {
        make_folders(target, name, subject,
                     [&](const Path& folder) { return steps.make_folder(folder); });
        const int error = steps.move(staged / name, target / name);
        if (error != 0) refuse_output(subject / name, "cannot be put in place", error);
    }
}

// Takes away the folders that held nothing but what gave way; the others are not empty and stay.
void remove_emptied(const FileCalls& calls, const Path& target, const Names& gave_way) {
    for (const std::string& name : gave_way) {
        const std::vector<std::string> folders = folders_of(name);
        for (auto inner = folders.rbegin(); inner != folders.rend(); ++inner) {
            if (calls.remove_folder(target / *inner) != 0) break;
        }
    }
}

}  // namespace

// The hidden folder. What new_files() holds becomes or joins the output folder; old_files() takes
// what gives way. Removed with all that is in it, unless kept.
class OutputSet::Staging {
  public:
    Staging(const Path& where, const Path& subject, const FileCalls& calls) {
        std::string name = (where / ".tincture-XXXXXX").string();
        if (mkdtemp(name.data()) == nullptr) refuse_output(subject, "cannot be written", errno);
        folder_ = name;
        // mkdtemp lets only the owner in; the folders inside have the permissions of any new
        // folder.
        int error = calls.make_folder(new_files());
        if (error == 0) error = calls.make_folder(old_files());
        if (error == 0) return;
        remove();
        refuse_output(subject, "cannot be written", error);
    }
    ~Staging() { remove(); }
    Staging(const Staging&) = delete;
    Staging& operator=(const Staging&) = delete;

    void keep() { kept_ = true; }
    [[nodiscard]] Path new_files() const { return folder_ / "new"; }
    [[nodiscard]] Path old_files() const { return folder_ / "old"; }

  private:
    void remove() noexcept {
        std::error_code ignored;  // all is done or all is taken back: nothing can be helped here
        if (!kept_) std::filesystem::remove_all(folder_, ignored);
    }

    Path folder_;
    bool kept_ = false;
};

OutputSet::OutputSet(OutputPlan plan, FileCalls calls)
    : plan_(std::move(plan)), calls_(std::move(calls)), target_(absolute_folder(plan_.folder)) {
    const Path where = nearest_folder(target_, plan_.folder);
    check_names({plan_.names.begin(), plan_.names.end()});
    staging_ = std::make_unique<Staging>(where, plan_.folder, calls_);
}

OutputSet::~OutputSet() = default;

void OutputSet::check_names(Names names) {
    for (const std::string& name : names) {
        if (!is_output_name(name) || name == manifest_name) {
            refuse_output(plan_.folder / name, "is no name for an output file");
        }
    }
    checked_.insert(names.begin(), names.end());
    names.insert(std::string(manifest_name));
    (void)what_gives_way(target_, plan_, names);
}

OutputSet::Path OutputSet::path(const std::string& name) {
    if (!staging_) throw std::logic_error("the output is committed");
    if (!checked_.contains(name)) check_names({name});
    make_folders(staging_->new_files(), name, plan_.folder, calls_.make_folder);
    wanted_.insert(name);
    return staging_->new_files() / name;
}

void OutputSet::add(const std::string& name, std::string_view bytes) {
    const int error = calls_.write(path(name), bytes);
    if (error != 0) refuse_output(plan_.folder / name, "cannot be written", error);
}

void OutputSet::write(const std::string& name, const std::function<void(const Path&)>& writer) {
    const Path staged = path(name);
    try {
        writer(staged);
    } catch (const Error& error) {
        if (error.subject() != staged.string()) throw;
        if (error.kind() == ErrorKind::output) refuse_output(plan_.folder / name, error.what());
        throw Error(error.kind(), (plan_.folder / name).string(), error.what());
    }
}

void OutputSet::commit() {
    throw_if_cancelled();
    if (!staging_) throw std::logic_error("the output is committed");
    const std::unique_ptr<Staging> staging = std::move(staging_);
    const auto files = staged_files(staging->new_files(), plan_.folder);
    for (const std::string& name : wanted_) {
        if (!files.contains(name)) refuse_output(plan_.folder / name, "was not written");
    }
    const int error = calls_.write(staging->new_files() / manifest_name,
                                   manifest_text(plan_.version, plan_.command, files));
    if (error != 0) refuse_output(plan_.folder / manifest_name, "cannot be written", error);

    std::vector<std::string> names;
    for (const auto& [name, bytes] : files) names.push_back(name);
    names.emplace_back(manifest_name);  // last, as the sign that the others are there
    const Names give_way = what_gives_way(target_, plan_, {names.begin(), names.end()});
    put_in_place(*staging, names, give_way);
    remove_emptied(calls_, target_, give_way);
}

// All of it or, with an exception, nothing.
void OutputSet::put_in_place(Staging& staging, const std::vector<std::string>& names,
                             const Names& give_way) {
    const Path& subject = plan_.folder;
    Steps steps(calls_);
    try {
        if (nearest_folder(target_, subject) == target_) {
            put_aside(steps, calls_, target_, staging.old_files(), give_way, subject);
            put_in(steps, staging.new_files(), target_, names, subject);
        } else {
            put_whole(steps, staging.new_files(), target_, subject);
        }
    } catch (const Error& error) {
        if (steps.undo()) throw;
        staging.keep();
        throw Error(error.kind(), error.subject(),
                    std::string(error.what()) +
                        "; not all could be put back: the earlier files are in " +
                        shown(staging.old_files().string()));
    } catch (...) {
        if (!steps.undo()) staging.keep();
        throw;
    }
}

}  // namespace tincture
