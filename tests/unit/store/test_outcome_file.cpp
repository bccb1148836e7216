#include <catch2/catch.hpp>
#include <cmath>
#include <csignal>
#include <filesystem>
#include <fstream>
#include <limits>
#include <sys/wait.h>
#include <unistd.h>

#include "sim/base/fault.h"
#include "sim/store/chunk.h"
#include "sim/store/outcome_reader.h"
#include "sim/store/outcome_writer.h"

using namespace lacuna;
namespace fs = std::filesystem;

namespace {

/// A directory of its own for each test, removed afterwards.
struct Folder {
    fs::path path = fs::temp_directory_path() / ("lacuna-store-" + std::to_string(::getpid()));
    Folder() {
        fs::remove_all(path);
        fs::create_directories(path);
    }
    ~Folder() { fs::remove_all(path); }
    std::string operator/(const std::string& name) const { return (path / name).string(); }
};

const ParallelFor serial = [](std::size_t count, const std::function<void(std::size_t)>& body) {
    for (std::size_t i = 0; i < count; ++i) body(i);
};

TableSpec spec() {
    return {"studies",
            {{"claim", ColumnType::u8, "1", "what the study says", {"inconclusive", "positive", "reversed"}},
             {"flag", ColumnType::u8, "1", "a small number", {}},
             {"literature", ColumnType::i32, "code", "literature", {}},
             {"estimate", ColumnType::f64, "effect", "noise, which does not compress", {}},
             {"few", ColumnType::f64, "effect", "few values, which do", {}}}};
}

Batch rows(std::size_t first, std::size_t count) {
    Batch batch = empty_batch(spec());
    batch.rows = count;
    for (std::size_t i = first; i < first + count; ++i) {
        std::get<0>(batch.columns[0]).push_back(static_cast<std::uint8_t>(i % 3));
        std::get<0>(batch.columns[1]).push_back(static_cast<std::uint8_t>(i % 200));
        std::get<1>(batch.columns[2]).push_back(static_cast<std::int32_t>(i / 7) - 5);
        std::get<2>(batch.columns[3]).push_back(std::sin(static_cast<double>(i) * 12.9898) * 43758.5453);
        std::get<2>(batch.columns[4]).push_back(i % 11 == 0 ? std::nan("") : static_cast<double>(i % 5));
    }
    return batch;
}

FileFacts facts() {
    FileFacts f;
    f.title = "Versuche mit Pflanzenstärkung — 試験";
    f.config_text = "title = \"x\"\n";
    f.resolved_config = "{}";
    f.digest = "ab";
    f.seed = "18446744073709551615";
    f.program_version = "0.1.0";
    return f;
}

void write(const std::string& path, std::size_t count, std::size_t batch, bool compress = true, bool overwrite = false) {
    OutcomeWriter writer(path, overwrite, facts(), {spec()}, compress, serial);
    for (std::size_t first = 0; first < count; first += batch) writer.append("studies", rows(first, std::min(batch, count - first)));
    writer.finish(true, 3, 3);
}

std::string bytes_of(const std::string& path) {
    std::ifstream in(path, std::ios::binary);
    return {std::istreambuf_iterator<char>(in), {}};
}

bool same_values(const ColumnData& a, const ColumnData& b) {
    if (a.index() != b.index()) return false;
    if (a.index() != 2) return a == b;
    const auto& x = std::get<2>(a);
    const auto& y = std::get<2>(b);
    if (x.size() != y.size()) return false;
    for (std::size_t i = 0; i < x.size(); ++i) {
        if (x[i] != y[i] && !(std::isnan(x[i]) && std::isnan(y[i]))) return false;
    }
    return true;
}

std::string message_of(const std::string& path) {
    try {
        const OutcomeReader reader(path);
        for (const TableSpec& table : reader.tables()) {
            for (const ColumnSpec& column : table.columns) reader.read(table.name, column.name);
        }
    } catch (const RunError& error) {
        return error.what();
    }
    return {};
}

}  // namespace

TEST_CASE("What is written is read back, at every edge of a chunk", "[store]") {
    const Folder folder;
    for (const bool compress : {true, false}) {
        for (const std::size_t count : {std::size_t{0}, std::size_t{1}, std::size_t{1000}, chunk_rows - 1, chunk_rows,
                                        chunk_rows + 1, 3 * chunk_rows + 17}) {
            INFO(count << " rows, compressed: " << compress);
            const std::string path = folder / "out.h5";
            write(path, count, 50000, compress, true);
            const OutcomeReader reader(path);
            CHECK(reader.complete());
            CHECK(reader.literatures_done() == 3);
            CHECK(reader.facts().title == facts().title);
            CHECK(reader.facts().seed == facts().seed);
            CHECK(reader.facts().config_text == facts().config_text);
            REQUIRE(reader.rows("studies") == count);
            const Batch expected = rows(0, count);
            const TableSpec written = spec();
            for (std::size_t c = 0; c < written.columns.size(); ++c) {
                const ColumnSpec& column = written.columns[c];
                CHECK(same_values(reader.read("studies", column.name), expected.columns[c]));
                const auto& all = reader.columns("studies");
                const auto found = std::find_if(all.begin(), all.end(), [&](const ColumnSpec& s) { return s.name == column.name; });
                REQUIRE(found != all.end());
                CHECK(found->labels == column.labels);
                CHECK(found->units == column.units);
                CHECK(found->description == column.description);
                CHECK(found->type == column.type);
            }
            if (count > 900) {
                CHECK(same_values(reader.read("studies", "estimate", 100, 800), rows(100, 800).columns[3]));
            }
        }
    }
}

TEST_CASE("Equal runs are equal bytes, whatever the batches", "[store]") {
    const Folder folder;
    write(folder / "a.h5", 150000, 150000);
    write(folder / "b.h5", 150000, 999);
    write(folder / "c.h5", 150000, 65536);
    CHECK(bytes_of(folder / "a.h5") == bytes_of(folder / "b.h5"));
    CHECK(bytes_of(folder / "a.h5") == bytes_of(folder / "c.h5"));
    CHECK(payload_digest(OutcomeReader(folder / "a.h5")) == payload_digest(OutcomeReader(folder / "b.h5")));
    write(folder / "d.h5", 150001, 65536);
    CHECK(payload_digest(OutcomeReader(folder / "a.h5")) != payload_digest(OutcomeReader(folder / "d.h5")));
}

TEST_CASE("Two hundred narrow columns stay a small file", "[store]") {
    const Folder folder;
    TableSpec wide{"literatures", {}};
    for (int c = 0; c < 200; ++c) wide.columns.push_back({"c" + std::to_string(c), ColumnType::f64, "studies", "a count of studies", {}});
    OutcomeWriter writer(folder / "wide.h5", false, facts(), {wide}, true, serial);
    Batch batch = empty_batch(wide);
    batch.rows = 1200;
    for (ColumnData& column : batch.columns) {
        for (int i = 0; i < 1200; ++i) std::get<2>(column).push_back(static_cast<double>(i * 7919 % 300));
    }
    writer.append("literatures", batch);
    writer.finish(true, 1, 1);
    CHECK(fs::file_size(folder / "wide.h5") < 1'000'000);
}

TEST_CASE("An unfinished writer leaves nothing, and what was there as it was", "[store]") {
    const Folder folder;
    write(folder / "out.h5", 10, 10);
    const std::string before = bytes_of(folder / "out.h5");
    {
        OutcomeWriter writer(folder / "out.h5", true, facts(), {spec()}, true, serial);
        writer.append("studies", rows(0, 70000));
        CHECK(fs::exists(writer.partial_path()));
    }
    CHECK(bytes_of(folder / "out.h5") == before);
    CHECK(std::distance(fs::directory_iterator(folder.path), {}) == 1);
}

TEST_CASE("Output that cannot be written is refused before anything runs", "[store]") {
    const Folder folder;
    write(folder / "there.h5", 1, 1);
    CHECK_THROWS_WITH(check_output(folder / "there.h5", false), Catch::Contains("is there already") && Catch::Contains("--overwrite"));
    CHECK_NOTHROW(check_output(folder / "there.h5", true));
    CHECK_THROWS_WITH(check_output(folder.path.string(), true), Catch::Contains("is a directory"));
    CHECK_THROWS_WITH(check_output(folder / "no/such/out.h5", false), Catch::Contains("there is no directory"));
    CHECK_THROWS_WITH(check_output("", false), Catch::Contains("needs a name"));
    CHECK_THROWS_AS(check_output(folder / "there.h5", false), InputError);
}

TEST_CASE("Files that are no outcome files get one clear message", "[store]") {
    const Folder folder;
    CHECK_THAT(message_of(folder / "missing.h5"), Catch::Contains("no such file"));
    std::ofstream(folder / "text.h5") << "not a table\n";
    CHECK_THAT(message_of(folder / "text.h5"), Catch::Contains("is not an HDF5 file"));
    std::ofstream(folder / "empty.h5");
    CHECK_THAT(message_of(folder / "empty.h5"), Catch::Contains("is not an HDF5 file"));
    CHECK_THAT(message_of(folder.path.string()), Catch::Contains("is not a file"));
    write(folder / "whole.h5", 100000, 100000);
    const std::string whole = bytes_of(folder / "whole.h5");
    for (const double share : {0.02, 0.3, 0.7, 0.99}) {
        std::ofstream(folder / "cut.h5", std::ios::binary) << whole.substr(0, static_cast<std::size_t>(share * static_cast<double>(whole.size())));
        CHECK_FALSE(message_of(folder / "cut.h5").empty());
    }
}

TEST_CASE("Flipped bits end in a message or in values, never in a dead reader's caller", "[store]") {
    const Folder folder;
    write(folder / "good.h5", 3000, 3000);
    const std::string good = bytes_of(folder / "good.h5");
    int signalled = 0;
    for (std::size_t trial = 0; trial < 60; ++trial) {
        std::string bad = good;
        // Half of the flips in the metadata at the front, half anywhere.
        const std::size_t at = trial * 2654435761u % (trial % 2 == 0 ? 4096 : bad.size());
        bad[at] = static_cast<char>(bad[at] ^ (1 << trial % 8));
        std::ofstream(folder / "bad.h5", std::ios::binary) << bad;
        const pid_t child = ::fork();  // the library itself may crash on damaged files (1 in 1000)
        if (child == 0) {
            ::alarm(20);
            for (const int signal : {SIGSEGV, SIGBUS, SIGABRT, SIGFPE}) ::signal(signal, SIG_DFL);  // not Catch's
            message_of(folder / "bad.h5");
            ::_exit(0);
        }
        int status = 0;
        ::waitpid(child, &status, 0);
        signalled += !WIFEXITED(status);
    }
    CHECK(signalled <= 2);
}
