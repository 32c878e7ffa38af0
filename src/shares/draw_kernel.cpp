#include "draw_kernel.hpp"

namespace isotally::shares {

void draw_baseline(const DrawBlock&);
void draw_avx2(const DrawBlock&);
void draw_avx512(const DrawBlock&);

std::vector<DrawKernel> draw_kernels() {
    std::vector<DrawKernel> found;
#ifdef ISOTALLY_WIDE_KERNELS
    if (__builtin_cpu_supports("avx512f") && __builtin_cpu_supports("avx512dq") &&
        __builtin_cpu_supports("avx512vl"))
        found.push_back({"avx512", draw_avx512});
    if (__builtin_cpu_supports("avx2") && __builtin_cpu_supports("fma"))
        found.push_back({"avx2", draw_avx2});
#endif
    found.push_back({"baseline", draw_baseline});
    return found;
}

}  // namespace isotally::shares
