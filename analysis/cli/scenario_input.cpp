#include "analysis/cli/scenario_input.h"

namespace lacuna {

std::vector<Override> overrides(const Options& options) {
    std::vector<Override> all;
    for (const std::string& set : options.sets) {
        // The key ends at the first '=' outside quotes: an array's element may be named in quotes.
        bool quoted = false;
        std::size_t at = 0;
        while (at < set.size() && (quoted || set[at] != '=')) quoted ^= set[at++] == '"';
        if (at == set.size()) at = set.find('=');
        all.push_back({set.substr(0, at), set.substr(at + 1)});
    }
    if (options.seed) all.push_back({"run.seed", *options.seed});
    if (options.literatures) all.push_back({"run.literatures", *options.literatures});
    return all;
}

}  // namespace lacuna
