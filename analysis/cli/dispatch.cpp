#include <fmt/format.h>

#include <exception>
#include <new>

#include "analysis/cli/commands.h"
#include "analysis/cli/console.h"
#include "sim/base/fault.h"

namespace lacuna {

namespace {

int dispatch(const Options& options, const BuildFacts& build) {
    switch (options.command) {
        case Command::check:
            return check_command(options);
        case Command::run:
            return run_command(options, build);
        case Command::analyse:
            return analyse_command(options, build);
        case Command::export_tables:
            return export_command(options);
    }
    throw Defect("dispatch: unknown command");
}

}  // namespace

int run_lacuna(int count, const char* const* arguments, const BuildFacts& build) {
    try {
        const Invocation invocation = parse_arguments(count, arguments, build);
        if (invocation.options) return dispatch(*invocation.options, build);
        print(invocation.text);
        return exit_code::done;
    } catch (const InputError& error) {
        for (const Fault& fault : error.faults()) message(to_string(fault) + "\n");
        return exit_code::unusable;
    } catch (const std::bad_alloc&) {
        message(
            "lacuna: out of memory (fewer threads need less: --threads 1; store.detail = \"literatures\" least)\n");
    } catch (const Defect& error) {
        message(fmt::format("lacuna: this is a defect of the program, please report it: {}\n", error.what()));
    } catch (const std::exception& error) {
        message(fmt::format("lacuna: {}\n", error.what()));
    }
    return exit_code::failed;
}

}  // namespace lacuna
