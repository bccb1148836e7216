#include <catch2/catch.hpp>

#include "analysis/cli/options.h"
#include "analysis/cli/scenario_input.h"
#include "sim/base/fault.h"

using namespace lacuna;

namespace {

Invocation parse(std::vector<const char*> arguments) {
    arguments.insert(arguments.begin(), "lacuna");
    return parse_arguments(static_cast<int>(arguments.size()), arguments.data(), {"1.2.3", "abc", "HDF5 1", "-O3"});
}

}  // namespace

TEST_CASE("options of run are read, and --set takes one argument", "[options]") {
    const Options options =
        *parse({"run", "--set", "a.b=1", "c.toml", "--set=c=\"x=y\"", "--seed", "-5", "--threads", "7", "--format",
                "json", "-o", "x.h5", "--overwrite", "--quiet", "--progress", "never", "--literatures", "9"})
             .options;
    CHECK(options.command == Command::run);
    CHECK(options.input == "c.toml");
    CHECK(options.output == "x.h5");
    CHECK(options.threads == 7);
    CHECK(options.format == Format::json);
    CHECK(options.progress == ShowProgress::never);
    CHECK(options.quiet);
    CHECK(options.overwrite);
    const std::vector<Override> all = overrides(options);
    REQUIRE(all.size() == 4);
    CHECK(all[0].key == "a.b");
    CHECK(all[0].value == "1");
    CHECK(all[1].key == "c");
    CHECK(all[1].value == "\"x=y\"");
    CHECK(all[2].key == "run.seed");
    CHECK(all[2].value == "-5");
    CHECK(all[3].key == "run.literatures");
    CHECK(all[3].value == "9");
}

TEST_CASE("a quoted name in a key may hold an equals sign", "[options]") {
    Options options;
    options.sets = {"journal.\"p = .05\".results_blind=1.0"};
    const std::vector<Override> all = overrides(options);
    CHECK(all[0].key == "journal.\"p = .05\".results_blind");
    CHECK(all[0].value == "1.0");
}

TEST_CASE("wrong arguments are named together with what to do", "[options]") {
    const auto faults = [](std::vector<const char*> arguments) {
        try {
            parse(std::move(arguments));
        } catch (const InputError& error) {
            return error.faults();
        }
        return std::vector<Fault>{};
    };
    CHECK(faults({"rnu"}).at(0).remedy == "did you mean run?");
    CHECK(faults({}).at(0).message == "a command is missing");
    CHECK(faults({"run", "--threds", "3", "c.toml"}).at(0).remedy == "did you mean --threads?");
    CHECK(faults({"run", "--threds", "3", "c.toml"}).size() == 1);
    CHECK(faults({"run", "c.toml", "--threads", "0", "--format", "xml", "--set", "x"}).size() == 3);
    CHECK(faults({"analyse"}).size() == 1);
    CHECK(faults({"run", "a.toml", "b.toml"}).at(0).message == "unexpected argument 'b.toml'");
}

TEST_CASE("help and version are texts", "[options]") {
    CHECK(parse({"--version"}).text.find("lacuna 1.2.3") == 0);
    CHECK(parse({"run", "--help"}).text.find("Example:") != std::string::npos);
    CHECK(!parse({"--help"}).options);
}
