#include "analysis/cli/options.h"

#include <CLI/CLI.hpp>
#include <charconv>
#include <map>
#include <memory>

#include "sim/base/fault.h"
#include "sim/config/nearest.h"

namespace lacuna {

namespace {

/// Arguments as CLI11 gives them; words are turned into choices afterwards, all faults at once.
struct Raw {
    Options options;
    std::string threads, format, progress;
    bool version = false;
};

struct CommandText {
    Command command;
    const char* name;
    const char* input;
    const char* input_text;
    const char* summary;
    const char* example;
};

const CommandText commands[] = {
    {Command::check, "check", "CONFIG", "scenario (TOML)",
     "validate a scenario; print the model, its size, exact expected values",
     "lacuna check configs/biostimulant-trials.toml --set field.true_rate=0.2"},
    {Command::run, "run", "CONFIG", "scenario (TOML)", "simulate a scenario, store it, print the headline table",
     "lacuna run configs/biostimulant-trials.toml -o trials.h5 --literatures 100"},
    {Command::analyse, "analyse", "OUT.h5", "outcome file of a run",
     "every estimand by regime and stratum, and the regimes' differences",
     "lacuna analyse trials.h5 --format csv > trials.csv"},
    {Command::export_tables, "export", "OUT.h5", "outcome file of a run",
     "results and stored tables of an outcome file as CSV files", "lacuna export trials.h5 -o trials-csv"}};

bool takes_config(Command command) { return command == Command::check || command == Command::run; }

void add_common(CLI::App& app, Raw& raw) {
    app.add_option("--progress", raw.progress, "progress on standard error: auto (default), always or never")
        ->type_name("WHEN");
    app.add_flag("--quiet", raw.options.quiet, "no progress and no messages, but for errors");
}

void add_config_options(CLI::App& app, Raw& raw) {
    // One argument per --set, or CLI11 would also take the CONFIG that follows.
    app.add_option("--set", raw.options.sets, "change a config key, e.g. --set field.true_rate=0.2; repeatable")
        ->type_name("KEY=VALUE")
        ->expected(1)
        ->multi_option_policy(CLI::MultiOptionPolicy::TakeAll)
        ->allow_extra_args(false);
    app.add_option("--seed", raw.options.seed, "the same as --set run.seed=N")->type_name("N");
    app.add_option("--literatures", raw.options.literatures, "the same as --set run.literatures=N")->type_name("N");
    app.add_option("--threads", raw.threads, "threads to use; default: all the machine has")->type_name("N");
}

CLI::App* add_command(CLI::App& app, const CommandText& text, Raw& raw) {
    CLI::App* sub = app.add_subcommand(text.name, text.summary);
    sub->allow_extras();
    sub->add_option(text.input, raw.options.input, text.input_text)->required()->type_name("");
    if (takes_config(text.command)) add_config_options(*sub, raw);
    if (text.command != Command::export_tables) {
        sub->add_option("--format", raw.format, "text (default), json or csv")->type_name("FORMAT");
    }
    if (text.command == Command::run) {
        sub->add_option("-o,--output", raw.options.output, "outcome file; default: CONFIG's name with .h5, here")
            ->type_name("OUT.h5");
    }
    if (text.command == Command::export_tables) {
        sub->add_option("-o,--output", raw.options.output, "directory for the CSV files")
            ->type_name("DIR")
            ->required();
    }
    if (text.command == Command::run || text.command == Command::export_tables) {
        sub->add_flag("--overwrite", raw.options.overwrite, "replace what is already there");
    }
    add_common(*sub, raw);
    sub->footer(std::string("Example:\n  ") + text.example);
    sub->callback([&raw, command = text.command] { raw.options.command = command; });
    return sub;
}

class Faults {
public:
    void add(std::string key, std::string message, std::string remedy) {
        faults_.push_back({{"command line", 0, 0}, std::move(key), std::move(message), std::move(remedy)});
    }
    void raise() const {
        if (!faults_.empty()) throw InputError(faults_);
    }

private:
    std::vector<Fault> faults_;
};

template <class Choice>
void choose(const std::string& key, const std::string& word, const std::vector<std::string>& names, Choice& choice,
            Faults& faults) {
    if (word.empty()) return;
    for (std::size_t i = 0; i < names.size(); ++i) {
        if (names[i] == word) {
            choice = static_cast<Choice>(i);
            return;
        }
    }
    faults.add(key, "'" + word + "' is not a choice", suggestion(word, names));
}

void read_threads(const std::string& word, unsigned& threads, Faults& faults) {
    if (word.empty()) return;
    unsigned value = 0;
    const auto [end, error] = std::from_chars(word.data(), word.data() + word.size(), value);
    if (error == std::errc() && end == word.data() + word.size() && value >= 1 && value <= 1024) {
        threads = value;
    } else {
        faults.add("--threads", "'" + word + "' is not a whole number from 1 to 1024", "");
    }
}

std::vector<std::string> option_names(const CLI::App& app) {
    std::vector<std::string> names;
    for (const CLI::Option* option : app.get_options()) {
        for (const std::string& name : option->get_lnames()) names.push_back("--" + name);
    }
    return names;
}

/// Unknown options first: what stands beside one may be its value, so it is only looked at without.
void check_extras(CLI::App& app, const std::vector<std::string>& extras, Faults& faults) {
    for (const std::string& extra : extras) {
        if (extra.size() < 2 || extra[0] != '-') continue;
        const std::string name = extra.substr(0, extra.find('='));
        faults.add(name, "unknown option", suggestion(name, option_names(app)));
    }
    faults.raise();
    for (const std::string& extra : extras) {
        faults.add("", "unexpected argument '" + extra + "'", "see lacuna " + app.get_name() + " --help");
    }
}

/// The command in `app` that was given, or a fault.
CLI::App& chosen_command(CLI::App& app, Faults& faults) {
    for (CLI::App* sub : app.get_subcommands()) return *sub;
    std::vector<std::string> names;
    for (const CommandText& text : commands) names.emplace_back(text.name);
    const std::vector<std::string> extras = app.remaining();
    const bool option = !extras.empty() && extras[0].starts_with('-');
    if (extras.empty())
        faults.add("", "a command is missing", "one of check, run, analyse, export; see lacuna --help");
    else if (option)
        faults.add(extras[0], "unknown option", suggestion(extras[0], option_names(app)));
    else
        faults.add("", "unknown command '" + extras[0] + "'", suggestion(extras[0], names));
    faults.raise();
    throw Defect("chosen_command: no fault found");
}

Options finish(CLI::App& app, Raw& raw) {
    Faults faults;
    CLI::App& command = chosen_command(app, faults);
    check_extras(command, command.remaining(), faults);
    choose("--format", raw.format, {"text", "json", "csv"}, raw.options.format, faults);
    choose("--progress", raw.progress, {"auto", "always", "never"}, raw.options.progress, faults);
    read_threads(raw.threads, raw.options.threads, faults);
    for (const std::string& set : raw.options.sets) {
        if (set.find('=') == std::string::npos || set[0] == '=') {
            faults.add("--set", "'" + set + "' is not of the form KEY=VALUE", "e.g. --set field.true_rate=0.2");
        }
    }
    faults.raise();
    return raw.options;
}

/// Help for the command that stands on the command line, or for all of it.
std::string help_text(CLI::App& app) {
    for (CLI::App* sub : app.get_subcommands({})) {
        if (sub->parsed() || sub->count_all() > 0) return sub->help("lacuna");
    }
    return app.help();
}

}  // namespace

Invocation parse_arguments(int count, const char* const* arguments, const BuildFacts& build) {
    Raw raw;
    CLI::App app("Simulates scientific literatures under selective publication, and says how wrong they are.",
                 "lacuna");
    app.allow_extras();
    app.add_flag("--version", raw.version, "print build facts and exit");
    app.footer(
        "Example:\n  lacuna run configs/biostimulant-trials.toml\nHelp on a command: lacuna COMMAND --help\n"
        "Exit codes: 0 done; 1 the run failed; 2 usage or config is wrong; 3 stopped early, state kept");
    for (const CommandText& text : commands) add_command(app, text, raw);
    try {
        app.parse(count, arguments);
    } catch (const CLI::CallForHelp&) {
        return {std::nullopt, help_text(app)};
    } catch (const CLI::ParseError& error) {
        Faults faults;  // a missing argument may come of a mistyped option before it
        for (CLI::App* sub : app.get_subcommands()) check_extras(*sub, sub->remaining(), faults);
        faults.add("", error.what(), "see lacuna --help");
        faults.raise();
    }
    if (raw.version) return {std::nullopt, version_text(build)};
    return {finish(app, raw), ""};
}

}  // namespace lacuna
