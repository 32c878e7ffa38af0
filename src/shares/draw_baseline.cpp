#define ISOTALLY_DRAW_FUNCTION draw_baseline
#include "draw_kernel.inc"
