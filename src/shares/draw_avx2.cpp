#define ISOTALLY_DRAW_FUNCTION draw_avx2
#include "draw_kernel.inc"
