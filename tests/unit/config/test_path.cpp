#include <catch2/catch.hpp>

#include "sim/config/nearest.h"
#include "sim/config/path.h"
#include "sim/config/toml_text.h"
#include "sim/config/utf8.h"

using namespace lacuna;

namespace {

using Parts = std::vector<std::string>;

Parts parts_of(const std::string& text) {
    const std::optional<ConfigPath> path = parse_path(text);
    return path ? path->parts : Parts{};
}

}  // namespace

TEST_CASE("paths are split at dots outside quotes") {
    CHECK(parts_of("field.true_rate") == Parts{"field", "true_rate"});
    CHECK(parts_of("journal.Crop Response Letters.accept") == Parts{"journal", "Crop Response Letters", "accept"});
    CHECK(parts_of("journal.\"A. B\".accept") == Parts{"journal", "A. B", "accept"});
    for (const char* bad : {"", ".", "a.", ".a", "a..b", "\"a", "\"\"", "\"a\"b"}) {
        INFO(bad);
        CHECK_FALSE(parse_path(bad).has_value());
    }
    CHECK(to_string(*parse_path("journal.\"A. B\".accept")) == "journal.\"A. B\".accept");
}

TEST_CASE("a value is put at a path and keeps its place") {
    ConfigNode root = parse_toml("[[lab]]\nname = \"A\"\n[[lab]]\nname = \"B\"\nshare = 0.5\n", "text");
    ConfigNode value;
    value.kind = ConfigNode::Kind::integer;
    value.integer = 7;
    value.place = {"elsewhere", 3, 4};
    const Place key_place{"elsewhere", 3, 1};
    CHECK_FALSE(assign(root, *parse_path("lab.*.lines"), value, key_place));
    CHECK_FALSE(assign(root, *parse_path("lab.B.share"), value, key_place));
    CHECK_FALSE(assign(root, *parse_path("run.seed"), value, key_place));
    CHECK(nearest_node(root, "lab.1.lines").integer == 7);
    CHECK(nearest_node(root, "lab.2.lines").place.source == "elsewhere");
    CHECK(nearest_node(root, "lab.2.share").place.line == 3);
    CHECK(nearest_node(root, "run.seed").integer == 7);
    CHECK(nearest_node(root, "lab.3.share").kind == ConfigNode::Kind::array);  // as far as the path goes
    CHECK(assign(root, *parse_path("lab.3.share"), value, key_place).has_value());
    CHECK(assign(root, *parse_path("lab.A.name.x"), value, key_place).has_value());
}

TEST_CASE("places count lines and characters from 1") {
    const ConfigNode root = parse_toml("# \u00fcber\n[run]\n  seed = 3\n\"\u00fcb\u00fc\" = \"\u00fc\"\n", "text");
    const ConfigEntry& run = root.entries.front();
    CHECK(run.place.line == 2);
    const ConfigEntry* seed = run.value.find("seed");
    REQUIRE(seed);
    CHECK(seed->place.column == 3);
    CHECK(seed->value.place.column == 10);
    const ConfigEntry* quoted_key = run.value.find("\u00fcb\u00fc");
    REQUIRE(quoted_key);
    CHECK(quoted_key->value.place.line == 4);
    CHECK(quoted_key->value.place.column == 9);
}

TEST_CASE("edits count insertions, deletions, substitutions and swaps (worked by hand)") {
    CHECK(edits("", "abc") == 3);
    CHECK(edits("seed", "seed") == 0);
    CHECK(edits("sede", "seed") == 1);
    CHECK(edits("kitten", "sitting") == 3);
    CHECK(edits("ca", "abc") == 3);  // optimal string alignment, where unrestricted distance gives 2
    CHECK(nearest("true_rat", {"labs", "true_rate"}) == "true_rate");
    CHECK(nearest("pineapple", {"labs", "true_rate"}).empty());
    CHECK(nearest("n", {"m", "no"}) == "no");  // not a word of which nothing is left
}

TEST_CASE("UTF-8 is told from what is not (RFC 3629, section 4)") {
    CHECK(utf8_length("a", 0) == 1);
    CHECK(utf8_length("\xC2\x80", 0) == 2);
    CHECK(utf8_length("\xE0\xA0\x80", 0) == 3);
    CHECK(utf8_length("\xED\x9F\xBF", 0) == 3);
    CHECK(utf8_length("\xF0\x90\x80\x80", 0) == 4);
    CHECK(utf8_length("\xF4\x8F\xBF\xBF", 0) == 4);
    for (const char* bad : {"\x80", "\xC0\xAF", "\xC1\xBF", "\xC2",
                            "\xC2"
                            "A",
                            "\xE0\x9F\xBF", "\xED\xA0\x80", "\xE1\x80", "\xF0\x8F\xBF\xBF", "\xF4\x90\x80\x80",
                            "\xF5\x80\x80\x80", "\xFF"}) {
        CHECK(utf8_length(bad, 0) == 0);
    }
}
