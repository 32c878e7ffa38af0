// What stands behind a FamilyModel.
#pragma once

#include <Eigen/Cholesky>
#include <Eigen/Core>
#include <map>
#include <memory>
#include <set>
#include <string>
#include <utility>
#include <vector>

#include "terms.hpp"

namespace isotally {

/// What all models of one fit share.
struct Fit {
    factors::Settings settings;
    std::map<std::string, int, std::less<>> compounds;  // those observed, by canonical SMILES
    struct Column {
        double variance = 0;
        std::vector<std::pair<int, double>> rows;
    };
    std::map<factors::Unknown, Column> columns;
    Eigen::LLT<Eigen::MatrixXd> factor;  // of S = H P H' + R
    std::vector<const Observation*> observations;
    std::vector<std::size_t> observation_of_row;
    std::map<std::pair<int, Relation>, std::vector<std::pair<const Observation*, int>>>
        carriers;  // of a group at a relation: record, groups on its ring
};

struct FamilyModel {
    std::shared_ptr<const Fit> fit;
    Eigen::VectorXd weights;  // S^-1 (y - H m), over the rows kept
    std::set<const Observation*> left_out;
    Eigen::MatrixXd removed;            // columns of S^-1 that belong to those rows
    Eigen::LLT<Eigen::MatrixXd> inner;  // their block of S^-1
};

namespace factors {

/// A linear form q seen by the fit: mean q.m + q P H' S^-1 (y - H m), and what makes the covariance of two
/// forms, q P q' - seen.seen' + put_back.put_back' (S = L L', seen = L^-1 H P q').
struct Projection {
    double mean = 0;
    Eigen::VectorXd seen, put_back;  // put_back: of the rows left out
};
Projection project(const FamilyModel& model, const Form& form);

/// q P q' of one form.
double prior_variance(const Settings& settings, const Form& form);

/// Posterior variance of one form.
double variance_of(const FamilyModel& model, const Form& form, const Projection& seen);

}  // namespace factors
}  // namespace isotally
