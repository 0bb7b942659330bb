/* Included before chain-brute-force.c, so that the time it prints is the processor time it has used. */
#include <time.h>
#undef CLOCK_MONOTONIC
#define CLOCK_MONOTONIC CLOCK_PROCESS_CPUTIME_ID
