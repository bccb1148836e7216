// The other reader and writer: h5py reads what the store writes, and the reverse.
#include <catch2/catch.hpp>
#include <cstdio>
#include <cstdlib>

#include "sim/store/chunk.h"
#include "tests/unit/store/sample_outcome.h"

using namespace lacuna;
using namespace lacuna::sample_outcome;

namespace {

const std::string scripts = std::string(LACUNA_REFERENCE) + "/../system/";
constexpr const char* python = "/usr/bin/python3";  // Debian's: the one with python3-h5py

bool has_h5py() { return std::system("/usr/bin/python3 -c 'import h5py' 2>/dev/null") == 0; }

std::string printed(const std::string& command) {
    FILE* pipe = ::popen((command + " 2>&1").c_str(), "r");
    REQUIRE(pipe != nullptr);
    std::string text;
    char buffer[1024];
    while (std::fgets(buffer, sizeof buffer, pipe) != nullptr) text += buffer;
    ::pclose(pipe);
    return text;
}

}  // namespace

TEST_CASE("h5py reads every column with its units, names and values", "[store]") {
    if (!has_h5py()) {
        WARN("not run: needs python3-h5py");
        return;
    }
    const Folder folder;
    const std::string path = folder / "out.h5";
    for (const bool compress : {true, false}) {
        for (const std::size_t count :
             {std::size_t{0}, std::size_t{1}, std::size_t{1000}, chunk_rows, 2 * chunk_rows + 5}) {
            INFO(count << " rows, compressed: " << compress);
            write(path, count, 30'000, compress, true);
            CHECK_THAT(printed(python + (" " + scripts + "read_outcome.py " + path)), Catch::StartsWith("ok"));
        }
    }
    // The values themselves, computed in NumPy from sample_outcome.h's formulas.
    CHECK(printed(python + (R"( -c "
import h5py, numpy
f = h5py.File(')" + path + R"(')
t = f['studies']
i = numpy.arange(2 * 65536 + 5)
assert h5py.check_enum_dtype(t['claim'].dtype) == {'inconclusive': 0, 'positive': 1, 'reversed': 2}
assert (t['claim'][:] == i % 3).all() and (t['flag'][:] == i % 200).all() and (t['literature'][:] == i // 7 - 5).all()
few = numpy.where(i % 11 == 0, numpy.nan, i % 5)
assert numpy.array_equal(t['few'][:], few, equal_nan=True)
assert numpy.allclose(t['estimate'][:], numpy.sin(i * 12.9898) * 43758.5453, rtol=1e-9, atol=1e-6)
assert f.attrs['title'] == 'Versuche mit Pflanzenstärkung — 試験' and f.attrs['seed'] == '18446744073709551615'
print('same')
")")) == "same\n");
}

TEST_CASE("A file by h5py in this format is read", "[store]") {
    if (!has_h5py()) {
        WARN("not run: needs python3-h5py");
        return;
    }
    const Folder folder;
    const std::string path = folder / "h5py.h5";
    REQUIRE(printed(python + (" " + scripts + "write_outcome.py " + path)).empty());
    const OutcomeReader reader(path);
    CHECK(reader.complete());
    CHECK(reader.literatures_done() == 12);
    CHECK(reader.facts().title == "Feldversuche — 試験");
    CHECK(reader.facts().seed == "7");
    REQUIRE(reader.rows("studies") == 70'000);
    const auto claim = std::get<0>(reader.read("studies", "claim"));
    const auto literature = std::get<1>(reader.read("studies", "literature"));
    const auto estimate = std::get<2>(reader.read("studies", "estimate"));
    for (const std::size_t i :
         {std::size_t{0}, std::size_t{4}, std::size_t{65'535}, std::size_t{65'536}, std::size_t{69'999}}) {
        CHECK(claim[i] == i % 3);
        CHECK(literature[i] == static_cast<std::int32_t>(i / 7) - 5);
        CHECK(estimate[i] == 0.25 * static_cast<double>(i));
    }
    for (const ColumnSpec& column : reader.columns("studies")) {
        CHECK(column.units == "1");
        CHECK(column.description == column.name + " by h5py");
        CHECK(column.labels.size() == (column.name == "claim" ? 3u : 0u));
    }
}
