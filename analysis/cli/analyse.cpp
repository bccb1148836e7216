#include <fmt/format.h>

#include "analysis/cli/commands.h"
#include "analysis/cli/console.h"
#include "analysis/cli/recorded_run.h"
#include "analysis/report/machine.h"
#include "analysis/report/tables.h"

namespace lacuna {

int analyse_command(const Options& options, const BuildFacts& build) {
    const RecordedRun run(options.input);
    const Results results = run.results();
    if (!run.file.complete() && !options.quiet) {
        message(fmt::format("{}: the run was stopped after {} of {} literatures\n", options.input,
                            run.file.literatures_done(), run.file.literatures_planned()));
    }
    switch (options.format) {
        case Format::text:
            print(full_tables(results) + provenance_line(results, build.version));
            break;
        case Format::json:
            print(results_json(results, build.version));
            break;
        case Format::csv:
            print(all_csv(results));
            break;
    }
    return exit_code::done;
}

}  // namespace lacuna
