// The inner loop of the intervals, built for several instruction sets.
#pragma once

#include <cstddef>
#include <vector>

namespace isotally::shares {

/// What a block of draws needs. Columns are contiguous, `count` long; arrays of columns are `sites` long.
struct DrawBlock {
    std::size_t sites = 0, count = 0;
    const double* ln_factor = nullptr;          // mean of ln(n_k F_k), by site
    const double* root = nullptr;               // lower factor of the covariance of ln F, row-major
    const double* const* model = nullptr;       // standard normals of the model, by site
    const double* const* laboratory = nullptr;  // of the laboratory's scatter, by site
    // a share of p percent scatters in ln p with sd min(most, hypot(points / p, relative))
    double points = 0, relative = 0, most = 0;
    double* const* percent = nullptr;  // out: shares another laboratory would find, by site
    double* rate = nullptr;            // out: sum of n_k F_k / 6
};

using DrawFunction = void (*)(const DrawBlock&);

struct DrawKernel {
    const char* instructions;
    DrawFunction run;
};

/// Those this processor can run, the widest first; "baseline" is always among them.
std::vector<DrawKernel> draw_kernels();

}  // namespace isotally::shares
