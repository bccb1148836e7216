#include <catch2/catch.hpp>
#include <thread>

#include "sim/store/chunk.h"
#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

TEST_CASE("What is written is read back, at every edge of a chunk", "[store]") {
    const Folder folder;
    for (const bool compress : {true, false}) {
        for (const std::size_t count : {std::size_t{0}, std::size_t{1}, std::size_t{1000}, chunk_rows - 1,
                                        chunk_rows, chunk_rows + 1, 3 * chunk_rows + 17}) {
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
                const auto found = std::find_if(all.begin(), all.end(),
                                                [&](const ColumnSpec& s) { return s.name == column.name; });
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
    for (const bool compress : {true, false}) {
        write(folder / "a.h5", 150000, 150000, compress, true);
        write(folder / "b.h5", 150000, 999, compress, true);
        write(folder / "c.h5", 150000, 65536, compress, true);
        CHECK(bytes_of(folder / "a.h5") == bytes_of(folder / "b.h5"));
        CHECK(bytes_of(folder / "a.h5") == bytes_of(folder / "c.h5"));
    }
    CHECK(payload_digest(OutcomeReader(folder / "a.h5")) == payload_digest(OutcomeReader(folder / "b.h5")));
    write(folder / "d.h5", 150001, 65536);
    CHECK(payload_digest(OutcomeReader(folder / "a.h5")) != payload_digest(OutcomeReader(folder / "d.h5")));
}

TEST_CASE("Equal runs are equal bytes, whatever the threads", "[store]") {
    const Folder folder;
    const auto with_threads = [&](const std::string& path, std::size_t threads) {
        const ParallelFor loop = [threads](std::size_t count, const std::function<void(std::size_t)>& body) {
            std::vector<std::thread> crew;
            for (std::size_t t = 0; t < threads; ++t) {
                crew.emplace_back([&, t] {
                    for (std::size_t i = count; i-- > 0;) {
                        if (i % threads == t) body(i);
                    }
                });
            }
            for (std::thread& one : crew) one.join();
        };
        OutcomeWriter writer(path, false, facts(), {spec()}, true, loop);
        // More chunks than are encoded at once (64).
        for (std::size_t first = 0; first < 14 * chunk_rows; first += 7 * chunk_rows)
            writer.append("studies", rows(first, 7 * chunk_rows));
        writer.append("studies", rows(14 * chunk_rows, 3));
        writer.finish(true, 3, 3);
    };
    write(folder / "plain.h5", 14 * chunk_rows + 3, 100'000);
    for (const std::size_t threads : {1, 2, 7}) {
        const std::string path = folder / std::to_string(threads);
        with_threads(path, threads);
        CHECK(bytes_of(path) == bytes_of(folder / "plain.h5"));
    }
}

TEST_CASE("Long, empty and many names are kept", "[store]") {
    const Folder folder;
    FileFacts long_facts = facts();
    long_facts.title.clear();
    long_facts.config_text.assign(5'000'000, '#');
    TableSpec wide = spec();
    wide.columns[0].labels.clear();
    for (int code = 0; code < 256; ++code)
        wide.columns[0].labels.push_back("kind " + std::to_string(code) + std::string(60, '.'));
    wide.columns[1].description.clear();
    const TableSpec empty{"questions", {{"question", ColumnType::i32, "code", "none was asked", {}}}};
    {
        OutcomeWriter writer(folder / "out.h5", false, long_facts, {wide, empty, {"points", {}}}, true, serial);
        writer.append("studies", rows(0, 10));
        CHECK_THROWS_AS(writer.append("laboratories", rows(0, 1)), Defect);
        writer.finish(false, 1, 4'000'000'000);
    }
    const OutcomeReader reader(folder / "out.h5");
    CHECK(reader.facts().title.empty());
    CHECK(reader.facts().config_text == long_facts.config_text);
    CHECK_FALSE(reader.complete());
    CHECK(reader.literatures_planned() == 4'000'000'000);
    const auto& columns = reader.columns("studies");
    const auto labelled =
        std::find_if(columns.begin(), columns.end(), [](const ColumnSpec& c) { return c.name == "claim"; });
    REQUIRE(labelled != columns.end());
    CHECK(labelled->labels == wide.columns[0].labels);
    CHECK(reader.rows("questions") == 0);
    CHECK(reader.columns("questions").size() == 1);
    CHECK(reader.has("points"));
    CHECK_FALSE(reader.has("laboratories"));
    CHECK_THROWS_WITH(reader.read("studies", "colour"), Catch::Contains("has no column 'colour'"));
}

TEST_CASE("Two hundred narrow columns stay a small file", "[store]") {
    const Folder folder;
    TableSpec wide{"literatures", {}};
    for (int c = 0; c < 200; ++c)
        wide.columns.push_back({"c" + std::to_string(c), ColumnType::f64, "studies", "a count of studies", {}});
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
    CHECK_THROWS_WITH(check_output(folder / "there.h5", false),
                      Catch::Contains("is there already") && Catch::Contains("--overwrite"));
    CHECK_NOTHROW(check_output(folder / "there.h5", true));
    CHECK_THROWS_WITH(check_output(folder.path.string(), true), Catch::Contains("is a directory"));
    CHECK_THROWS_WITH(check_output(folder / "no/such/out.h5", false), Catch::Contains("there is no directory"));
    CHECK_THROWS_WITH(check_output("", false), Catch::Contains("needs a name"));
    CHECK_THROWS_AS(check_output(folder / "there.h5", false), InputError);
}

TEST_CASE("Rows of what was not finished are forgotten, written or waiting", "[store]") {
    const Folder folder;
    for (const std::size_t kept :
         {std::size_t{0}, std::size_t{70000}, chunk_rows, std::size_t{150}, std::size_t{140000}}) {
        const std::string path = folder / std::to_string(kept);
        OutcomeWriter writer(path, false, facts(), {spec()}, true, serial);
        writer.append("studies", rows(0, 140000));
        writer.keep_rows("studies", kept);
        writer.finish(false, 1, 3);
        const OutcomeReader reader(path);
        CHECK_FALSE(reader.complete());
        REQUIRE(reader.rows("studies") == kept);
        CHECK(same_values(reader.read("studies", "estimate"), rows(0, kept).columns[3]));
    }
}
