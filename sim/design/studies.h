// How each design's studies are drawn; one function a design, called by draw_studies alone.
#pragma once

#include "sim/design/sampling.h"

namespace lacuna {

/// One or two means by Student's t: t = (Z + noncentrality) / sqrt(chi-squared / df), numerator
/// and variance independent (Johnson, Kotz & Balakrishnan 1995, ch. 31). The fast path: no equivalence test.
void draw_simple_studies(const StudyRound& round, const Design& design, const TestTable& table,
                         SamplingScratch& scratch, StudyBatch batch);

/// The same, or the z test, with two one-sided tests after a result that is not significant.
void draw_mean_studies(const StudyRound& round, const Design& design, const TestTable& table,
                       SamplingScratch& scratch, StudyBatch batch);

/// Welch's t: the groups' variances are drawn apart.
void draw_welch_studies(const StudyRound& round, const Design& design, const TestTable& table,
                        SamplingScratch& scratch, StudyBatch batch);

/// Pearson's r of bivariate normal data: with theta = rho / sqrt(1 - rho^2),
/// t = (theta chi_{n-1} + Z) / (chi_{n-2} / sqrt(n-2)), r = t / sqrt(t^2 + n - 2), all independent
/// (Johnson, Kotz & Balakrishnan 1995, ch. 32).
void draw_correlation_studies(const StudyRound& round, const Design& design, const TestTable& table,
                              SamplingScratch& scratch, StudyBatch batch);

/// F of g groups: ((Z + f sqrt(N))^2 + chi-squared_{g-2}) / (g - 1) over chi-squared_{N-g} / (N - g) (the same,
/// ch. 30).
void draw_several_means_studies(const StudyRound& round, const Design& design, const TestTable& table,
                                SamplingScratch& scratch, StudyBatch batch);

/// Score z of two binomial counts.
void draw_two_proportions_studies(const StudyRound& round, const Design& design, const TestTable& table,
                                  SamplingScratch& scratch, StudyBatch batch);

/// One or two means with the looks of `looks`: a study ends at the first significant or futile one, or the last.
void draw_sequential_studies(const StudyRound& round, const Design& design, const TestTable& table, const LookRows& looks,
                             SamplingScratch& scratch, StudyBatch batch);

}  // namespace lacuna
