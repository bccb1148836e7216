// The families of estimands, one file each. Every function appends its family's estimands for the
// part of the studies it is given, under the name `stratum`.
#pragma once

#include <string>

#include "analysis/estimand/part.h"

namespace lacuna {

void add_false_discovery_rate(const Part& part, const std::string& stratum, Estimands& out);
void add_false_discovery_rate_manuscripts(const Part& part, Estimands& out);
void add_false_discovery_rate_questions(const Part& part, Estimands& out);
void add_wrong_sign_rate(const Part& part, Estimands& out);
void add_false_nonfinding_rate(const Part& part, Estimands& out);
void add_effect_inflation(const Part& part, const std::string& stratum, Estimands& out);
void add_effect_size(const Part& part, Estimands& out);
void add_positive_share(const Part& part, const std::string& stratum, Estimands& out);
void add_error_rates(const Part& part, const std::string& stratum, Estimands& out);
void add_publication_rate(const Part& part, const std::string& stratum, Estimands& out);
void add_publication_rate_by_result(const Part& part, Estimands& out);
void add_missing_share(const Part& part, Estimands& out);
void add_participants(const Part& part, Estimands& out);

}  // namespace lacuna
