#include <catch2/catch.hpp>
#include <nlohmann/json.hpp>
#include <sstream>

#include "analysis/report/machine.h"
#include "analysis/report/tables.h"
#include "analysis/report/text_table.h"
#include "tests/unit/report/sample_results.h"

using namespace lacuna;

namespace {

/// Fields of one CSV text by the rules of RFC 4180.
std::vector<std::vector<std::string>> parse_csv(const std::string& text) {
    std::vector<std::vector<std::string>> rows{{""}};
    bool quoted = false;
    for (std::size_t i = 0; i < text.size(); ++i) {
        const char byte = text[i];
        std::string& field = rows.back().back();
        if (quoted) {
            if (byte != '"')
                field += byte;
            else if (i + 1 < text.size() && text[i + 1] == '"')
                field += text[++i];
            else
                quoted = false;
        } else if (byte == '"') {
            quoted = true;
        } else if (byte == ',') {
            rows.back().emplace_back();
        } else if (byte == '\n') {
            rows.emplace_back(1);
        } else if (byte != '\r') {
            field += byte;
        }
    }
    rows.pop_back();
    return rows;
}

}  // namespace

TEST_CASE("JSON has the fields that scripts rely on", "[report]") {
    const auto all = nlohmann::json::parse(results_json(sample_results(), "1.2.3"));
    CHECK(all["lacuna"] == "1.2.3");
    CHECK(all["digest"] == "abc123");
    REQUIRE(all["results"].size() == 8);
    const auto& first = all["results"][0];
    CHECK(first["metric"] == "false_discovery_rate");
    CHECK(first["scope"] == "conducted");
    CHECK(first["regime"] == "standing rules");
    CHECK(first["point"] == 0);
    CHECK(first["stratum"] == "all");
    CHECK(first["estimate"] == 0.3127);
    CHECK(first["mcse"] == 0.0012);
    CHECK(first["literatures"] == 400);
    CHECK(first["spread"]["p05"] == 0.25);
    CHECK(first["spread"]["p95"] == 0.36);
    CHECK(all["results"][3]["estimate"].get<double>() == 1.0 / 3);
    CHECK(all["results"][4]["estimate"].is_null());
    CHECK(all["results"][4]["spread"].is_null());
    CHECK(all["results"][5]["mcse"].is_null());
    REQUIRE(all["differences"].size() == 4);
    CHECK(all["differences"][1]["regime"] == "blind, \"all\"");
    CHECK(all["differences"][1]["against"] == "standing rules");
}

TEST_CASE("CSV is tidy, quoted where needed, and empty where missing", "[report]") {
    const auto rows = parse_csv(results_csv(sample_results()));
    REQUIRE(rows.size() == 9);
    CHECK(rows[0] == std::vector<std::string>{"metric", "scope", "regime", "point", "stratum", "estimate", "mcse",
                                              "literatures", "p05", "p25", "p50", "p75", "p95"});
    for (const auto& row : rows) CHECK(row.size() == rows[0].size());
    CHECK(rows[2][2] == "blind, \"all\"");
    CHECK(std::stod(rows[4][5]) == 1.0 / 3);
    CHECK(rows[5] == std::vector<std::string>{"power", "published", "standing rules", "0", "all", "", "", "0", "",
                                              "", "", "", ""});
    const auto differences = parse_csv(differences_csv(sample_results()));
    REQUIRE(differences.size() == 5);
    CHECK(differences[0][3] == "against");
    CHECK(differences[2][3] == "standing rules");
    const auto both = parse_csv(all_csv(sample_results()));
    REQUIRE(both.size() == 13);
    for (const auto& row : both) CHECK(row.size() == 14);
    CHECK(both[1][3].empty());
    CHECK(both[9][3] == "standing rules");
}

TEST_CASE("the headline shows headline metrics, explains itself, and fits 100 columns", "[report]") {
    const std::string text = headline_tables(sample_results());
    CHECK(text.find("0.3127 ± 0.0012") != std::string::npos);
    CHECK(text.find("claim=positive") == std::string::npos);
    CHECK(text.find("Differences from 'standing rules'") != std::string::npos);
    CHECK(text.find("0.1300 ± 0.0020") != std::string::npos);
    CHECK(text.find("one Monte Carlo standard error") != std::string::npos);
    CHECK(text.find("5-95 %") != std::string::npos);
    CHECK(text.find("empty denominator") != std::string::npos);
    CHECK(text.find("exactly 0 under every regime, not shown: 1.") != std::string::npos);
    std::istringstream lines(text);
    for (std::string line; std::getline(lines, line);) CHECK(shown_width(line) <= text_width);
}

TEST_CASE("the full tables hold every stratum, and one regime has no differences", "[report]") {
    CHECK(full_tables(sample_results()).find("publication_rate claim=positive") != std::string::npos);
    Results one = sample_results();
    one.regimes.resize(1);
    one.differences.clear();
    std::erase_if(one.results, [](const Result& result) { return result.regime > 0; });
    CHECK(full_tables(one).find("Differences") == std::string::npos);
}
