#include "output/output_set.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <csignal>
#include <stdexcept>

#include "support/cancel.h"
#include "support/error.h"
#include "temporary_folder.h"

namespace tincture {
namespace {

namespace fs = std::filesystem;
using testing::HasSubstr;
using Contents = std::map<std::string, std::string>;

OutputPlan plan_for(const fs::path& folder, std::vector<std::string> names, bool force = false) {
    OutputPlan plan;
    plan.folder = folder;
    plan.names = std::move(names);
    plan.command = "reduce";
    plan.version = "1.2.3";
    plan.force = force;
    return plan;
}

// The Error(output) that `action` throws, as "subject: message"; empty if it throws none.
std::string refusal(const std::function<void()>& action) {
    try {
        action();
    } catch (const Error& error) {
        EXPECT_EQ(error.kind(), ErrorKind::output);
        return error.subject() + ": " + error.what();
    }
    return "";
}

// Writes each name with itself as content.
void run(OutputPlan plan, FileCalls calls = {}) {
    const std::vector<std::string> names = plan.names;
    OutputSet set(std::move(plan), std::move(calls));
    for (const std::string& name : names) set.add(name, name);
    set.commit();
}

std::string manifest_of(const std::vector<std::string>& names) {
    std::string text = "{\n  \"tincture\": \"1.2.3\",\n  \"command\": \"reduce\",\n  \"files\": [";
    for (const std::string& name : names) {
        text += (name == names.front() ? "" : ",");
        text += "\n    {\n      \"name\": \"" + name +
                "\",\n      \"bytes\": " + std::to_string(name.size()) + "\n    }";
    }
    return text + "\n  ]\n}\n";
}

TEST(OutputSet, MakesTheFolderInOneStep) {
    const TemporaryFolder temporary;
    OutputSet set(plan_for(temporary / "a/b/out/", {"study.json", "plates/01-red.tif"}));
    set.add("study.json", "{}");
    set.add("plates/01-red.tif", std::string("\0red", 4));
    for (const auto& [name, bytes] : contents(temporary.path())) {
        EXPECT_EQ(name.substr(0, 10), ".tincture-") << "visible before commit";
    }
    set.commit();
    const std::string manifest =
        "{\n  \"tincture\": \"1.2.3\",\n  \"command\": \"reduce\",\n  \"files\": [\n"
        "    {\n      \"name\": \"plates/01-red.tif\",\n      \"bytes\": 4\n    },\n"
        "    {\n      \"name\": \"study.json\",\n      \"bytes\": 2\n    }\n  ]\n}\n";
    EXPECT_EQ(contents(temporary.path()), (Contents{{"a/", ""},
                                                    {"a/b/", ""},
                                                    {"a/b/out/", ""},
                                                    {"a/b/out/manifest.json", manifest},
                                                    {"a/b/out/plates/", ""},
                                                    {"a/b/out/plates/01-red.tif", {"\0red", 4}},
                                                    {"a/b/out/study.json", "{}"}}));
}

TEST(OutputSet, LeavesNothingWithoutCommit) {
    const TemporaryFolder temporary;
    put(temporary / "old/keep.txt", "mine");
    const Contents before = contents(temporary.path());
    for (const char* folder : {"new/folder", "old"}) {
        OutputSet set(plan_for(temporary / folder, {"a", "b/c"}));
        set.add("b/c", "half");
        EXPECT_NE(contents(temporary.path()), before);
    }
    EXPECT_EQ(contents(temporary.path()), before);
}

TEST(OutputSet, TakesPermissionsFromTheUmask) {
    const TemporaryFolder temporary;
    const mode_t before = umask(027);
    run(plan_for(temporary / "up/out", {"a", "b/c"}));
    umask(before);
    const auto mode = [&](const char* name) {
        return static_cast<unsigned>(fs::status(temporary / name).permissions());
    };
    EXPECT_EQ(mode("up"), 0750U);
    EXPECT_EQ(mode("up/out"), 0750U);
    EXPECT_EQ(mode("up/out/b"), 0750U);
    EXPECT_EQ(mode("up/out/a"), 0640U);
    EXPECT_EQ(mode("up/out/manifest.json"), 0640U);
}

TEST(OutputSet, JoinsWhatElseIsInTheFolder) {
    const TemporaryFolder temporary;
    put(temporary / "out/plates/note.txt", "mine");
    run(plan_for(temporary / "out", {"a", "plates/01"}));
    EXPECT_EQ(contents(temporary / "out"),
              (Contents{{"a", "a"},
                        {"manifest.json", manifest_of({"a", "plates/01"})},
                        {"plates/", ""},
                        {"plates/01", "plates/01"},
                        {"plates/note.txt", "mine"}}));
}

TEST(OutputSet, FindsItsFolderFromAnywhere) {
    const TemporaryFolder temporary;
    fs::create_directory(temporary / "real");
    fs::create_directory_symlink("real", temporary / "link");
    const fs::path before = fs::current_path();
    fs::current_path(temporary.path());
    OutputSet set(plan_for("new/out", {"a"}));
    run(plan_for(".", {"here"}));
    run(plan_for("link", {"there"}));
    run(plan_for("missing/../round", {"about"}));
    fs::current_path(before);
    set.add("a", "a");
    set.commit();
    EXPECT_EQ(text_of(temporary / "new/out/a"), "a");
    EXPECT_EQ(text_of(temporary / "here"), "here");
    EXPECT_EQ(text_of(temporary / "real/there"), "there");
    EXPECT_EQ(text_of(temporary / "round/about"), "about");
    EXPECT_FALSE(fs::exists(temporary / "missing"));
}

TEST(OutputSet, RefusesToOverwriteBeforeTheWorkStarts) {
    const TemporaryFolder temporary;
    for (const char* name : {"a", "plates/01", "manifest.json"}) {
        const TemporaryFolder one;
        put(one / name, "mine");
        const Contents before = contents(one.path());
        const auto act = [&] { const OutputSet set(plan_for(one.path(), {"a", "plates/01"})); };
        EXPECT_EQ(refusal(act),
                  (one / name).string() +
                      ": exists already; choose another folder with --out or give --force");
        EXPECT_EQ(contents(one.path()), before);
    }
    put(temporary / "late", "mine");
    OutputSet set(plan_for(temporary.path(), {"a"}));
    EXPECT_THAT(refusal([&] { set.add("late", "new"); }), HasSubstr("late: exists already"));
}

TEST(OutputSet, RefusesWhatAppearsWhileItWorks) {
    const TemporaryFolder temporary;
    for (const char* folder : {"there", "new"}) {
        if (folder == std::string("there")) fs::create_directory(temporary / folder);
        OutputSet set(plan_for(temporary / folder, {"a", "b"}));
        set.add("a", "a");
        set.add("b", "b");
        put(temporary / folder / "b", "mine");
        EXPECT_THAT(refusal([&] { set.commit(); }), HasSubstr("b: exists already"));
        EXPECT_EQ(contents(temporary / folder), (Contents{{"b", "mine"}}));
    }
}

TEST(OutputSet, NeverRenamesOntoAnything) {
    const TemporaryFolder temporary;
    put(temporary / "from", "from");
    put(temporary / "to", "to");
    fs::create_directory(temporary / "full");
    fs::create_directory(temporary / "empty");
    const FileCalls calls;
    EXPECT_EQ(calls.move(temporary / "from", temporary / "to"), EEXIST);
    EXPECT_EQ(calls.move(temporary / "full", temporary / "empty"), EEXIST);
    EXPECT_EQ(calls.write(temporary / "to", "new"), EEXIST);
    EXPECT_EQ(text_of(temporary / "to"), "to");
}

TEST(OutputSet, ForceReplacesAndRemovesWhatTheManifestLists) {
    const TemporaryFolder temporary;
    run(plan_for(temporary / "out", {"a", "b", "plates/01", "plates/02", "films/01"}));
    put(temporary / "out/plates/note.txt", "mine");
    put(temporary / "out/thesis.doc", "mine");
    put(temporary / "out/a", "changed");
    run(plan_for(temporary / "out", {"a", "c", "plates/02"}, true));
    EXPECT_EQ(contents(temporary / "out"),
              (Contents{{"a", "a"},
                        {"c", "c"},
                        {"manifest.json", manifest_of({"a", "c", "plates/02"})},
                        {"plates/", ""},
                        {"plates/02", "plates/02"},
                        {"plates/note.txt", "mine"},
                        {"thesis.doc", "mine"}}));
}

TEST(OutputSet, ForcePutsAFolderWhereTheLastRunHadAFile) {
    const TemporaryFolder temporary;
    run(plan_for(temporary / "out", {"plates"}));
    run(plan_for(temporary / "out", {"plates/01"}, true));
    EXPECT_EQ(text_of(temporary / "out/plates/01"), "plates/01");
}

TEST(OutputSet, ForceReplacesALinkAndNotWhatItLeadsTo) {
    const TemporaryFolder temporary;
    put(temporary / "elsewhere", "mine");
    fs::create_directory(temporary / "out");
    fs::create_symlink("../elsewhere", temporary / "out/a");
    run(plan_for(temporary / "out", {"a"}, true));
    EXPECT_EQ(text_of(temporary / "elsewhere"), "mine");
    EXPECT_TRUE(fs::is_regular_file(fs::symlink_status(temporary / "out/a")));
}

TEST(OutputSet, NeverTouchesAnInput) {
    const TemporaryFolder temporary;
    const fs::path out = temporary / "out";
    run(plan_for(out, {"old.png", "gone.png"}));
    fs::create_symlink("out/old.png", temporary / "link.png");
    fs::create_hard_link(out / "old.png", temporary / "hard.png");
    const Contents before = contents(temporary.path());
    for (const fs::path& input : {out / "old.png", out / "../out/./old.png", temporary / "link.png",
                                  temporary / "hard.png", out / "gone.png"}) {
        for (const bool force : {true, false}) {
            if (!force && input == out / "gone.png") continue;
            OutputPlan plan = plan_for(out, {"new.png", "old.png"}, force);
            plan.inputs = {temporary / "missing.png", input};
            EXPECT_THAT(refusal([&] { run(plan); }),
                        HasSubstr(".png: is read by this run and would be overwritten or removed"))
                << input;
            EXPECT_EQ(contents(temporary.path()), before);
        }
    }
    put(out / "photo.png", "photo");
    OutputPlan plan = plan_for(out, {"old.png"}, true);
    plan.inputs = {out / "photo.png"};
    run(plan);
    EXPECT_EQ(text_of(out / "photo.png"), "photo");
}

TEST(OutputSet, RefusesWhatCannotGiveWay) {
    const TemporaryFolder temporary;
    const auto refused = [&](const char* name) {
        const Contents before = contents(temporary.path());
        const std::string text = refusal([&] { run(plan_for(temporary.path(), {name}, true)); });
        EXPECT_EQ(contents(temporary.path()), before);
        return text;
    };
    put(temporary / "folder/mine.txt", "mine");
    put(temporary / "file", "mine");
    fs::create_directory_symlink("folder", temporary / "link");
    ASSERT_EQ(mkfifo((temporary / "pipe").c_str(), 0600), 0);
    EXPECT_THAT(refused("folder"), HasSubstr("folder: is a folder where a file has to go"));
    EXPECT_THAT(refused("file/01"), HasSubstr("file: is a file and no folder"));
    EXPECT_THAT(refused("link/01"), HasSubstr("link: is a link and no folder"));
    EXPECT_THAT(refused("pipe"), HasSubstr("pipe: is no ordinary file"));
}

TEST(OutputSet, RefusesAFolderThatCannotBe) {
    const TemporaryFolder temporary;
    put(temporary / "file", "mine");
    fs::create_symlink("nowhere", temporary / "broken");
    const Contents before = contents(temporary.path());
    const auto refused = [&](const fs::path& folder) {
        return refusal([&] { const OutputSet set(plan_for(folder, {"a"})); });
    };
    EXPECT_EQ(refused(""), ": the output folder has no name; choose another folder with --out");
    EXPECT_THAT(refused(temporary / "file"), HasSubstr("file: is a file and no folder"));
    EXPECT_THAT(refused(temporary / "file/below/it"), HasSubstr("it: lies below a file"));
    EXPECT_THAT(refused(temporary / "broken"), HasSubstr("link that leads nowhere"));
    EXPECT_THAT(refused(temporary / "broken/below"), HasSubstr("link that leads nowhere"));
    EXPECT_THAT(refused(temporary / std::string(300, 'x')), HasSubstr("the name is too long"));
    EXPECT_THAT(refused("/proc/out"), HasSubstr("/proc/out: cannot be written"));  // root too
    EXPECT_EQ(contents(temporary.path()), before);
}

TEST(OutputSet, RefusesAFolderWithoutPermission) {
    if (geteuid() == 0) GTEST_SKIP() << "permissions do not bind root";
    const TemporaryFolder temporary;
    fs::create_directory(temporary / "out");
    fs::permissions(temporary / "out", fs::perms::owner_read | fs::perms::owner_exec);
    for (const char* folder : {"out", "out/new"}) {
        EXPECT_THAT(refusal([&] { const OutputSet set(plan_for(temporary / folder, {"a"})); }),
                    HasSubstr("cannot be written: permission denied; choose another folder"));
    }
}

TEST(OutputSet, RefusesNamesThatLeaveTheFolder) {
    const TemporaryFolder temporary;
    for (const std::string& name :
         {std::string(), std::string("/a"), std::string("../a"), std::string("a/../../b"),
          std::string("a//b"), std::string("a/"), std::string("./a"), std::string(".hidden"),
          std::string("a/.b"), std::string("a\0b", 3), std::string("caf\xe9"),
          std::string("manifest.json")}) {
        EXPECT_THAT(refusal([&] { const OutputSet set(plan_for(temporary / "out", {name})); }),
                    HasSubstr("is no name for an output file"));
        OutputSet set(plan_for(temporary / "out", {}));
        EXPECT_THAT(refusal([&] { set.add(name, ""); }),
                    HasSubstr("is no name for an output file"));
    }
}

TEST(OutputSet, ChecksWhatWasStaged) {
    const TemporaryFolder temporary;
    {
        OutputSet set(plan_for(temporary / "out", {"a", "never needed"}));
        (void)set.path("a");
        EXPECT_THAT(refusal([&] { set.commit(); }), HasSubstr("out/a: was not written"));
    }
    {
        OutputSet set(plan_for(temporary / "out", {"a"}));
        fs::create_symlink("/etc/passwd", set.path("a"));
        EXPECT_THAT(refusal([&] { set.commit(); }),
                    HasSubstr("out/a: was staged and is no output"));
    }
    EXPECT_TRUE(contents(temporary.path()).empty());
    OutputSet set(plan_for(temporary / "out", {"a", "never needed"}));
    set.add("a", "a");
    EXPECT_THAT(refusal([&] { set.add("a", "again"); }), HasSubstr("out/a: cannot be written"));
    put(set.path("a").string() + ".aux.xml", "side");  // what a library writes beside a file
    set.commit();
    EXPECT_THAT(text_of(temporary / "out/manifest.json"), HasSubstr("\"a.aux.xml\""));
    EXPECT_THROW(set.commit(), std::logic_error);
    EXPECT_THROW((void)set.path("b"), std::logic_error);
}

TEST(OutputSet, NamesTheFileAsTheUserKnowsIt) {
    const TemporaryFolder temporary;
    OutputSet set(plan_for(temporary / "out", {"a.png"}));
    const auto fail = [](const fs::path& path) {
        throw Error(ErrorKind::output, path.string(), "cannot be written: the disk is full");
    };
    EXPECT_EQ(refusal([&] { set.write("a.png", fail); }),
              (temporary / "out/a.png").string() +
                  ": cannot be written: the disk is full; choose another folder with --out");
    set.write("a.png", [](const fs::path& path) { put(path, "png"); });
    set.commit();
    EXPECT_EQ(text_of(temporary / "out/a.png"), "png");
}

TEST(OutputSet, HeedsCancellingBeforeItCommits) {
    const TemporaryFolder temporary;
    const auto cancelled = [&] {
        bool thrown = false;
        {
            OutputSet set(plan_for(temporary / "out", {"a"}));
            set.add("a", "a");
            request_cancel();
            try {
                set.commit();
            } catch (const Error& error) {
                thrown = error.kind() == ErrorKind::cancelled;
            }
        }
        _exit(thrown && contents(temporary.path()).empty() ? 0 : 1);
    };
    EXPECT_EXIT(cancelled(), testing::ExitedWithCode(0), "");  // cancelling ends with the process
}

TEST(OutputSet, NoticesAWriteCutShort) {
    const TemporaryFolder temporary;
    rlimit before{};
    ASSERT_EQ(getrlimit(RLIMIT_FSIZE, &before), 0);
    const auto handler = std::signal(SIGXFSZ, SIG_IGN);
    const rlimit small{1000, before.rlim_max};
    ASSERT_EQ(setrlimit(RLIMIT_FSIZE, &small), 0);
    const std::string text = refusal([&] {
        OutputSet set(plan_for(temporary / "out", {"a"}));
        set.add("a", std::string(5000, 'a'));
    });
    setrlimit(RLIMIT_FSIZE, &before);
    std::signal(SIGXFSZ, handler);
    EXPECT_THAT(text, HasSubstr("a: cannot be written: the file would be larger than is allowed"));
    EXPECT_TRUE(contents(temporary.path()).empty());
}

}  // namespace
}  // namespace tincture
