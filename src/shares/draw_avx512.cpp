#define ISOTALLY_DRAW_FUNCTION draw_avx512
#include "draw_kernel.inc"
