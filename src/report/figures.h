/* Numbers as people read them; "-" where there is none. */
#ifndef REPORT_FIGURES_H
#define REPORT_FIGURES_H

#include "gap/analysis.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Long enough for any figure below. */
struct figure {
	char text[48];
};

/* Bits per symbol, 4 decimals; fewer from 100 bits on. */
struct figure figure_bits(bool known, double bits);
/* The same with its sign: terms that can lie on either side. */
struct figure figure_signed(bool known, double bits);
/* "[1.2345,1.3456]" */
struct figure figure_interval(double low, double high);
/* One decimal, up to 99999.9. */
struct figure figure_percent(bool known, double percent);
/* "4,194,304" */
struct figure figure_count(uint64_t count);
/* "512", "64K", "1.5M", "12M": 1024-based, at most 5 characters; "-". */
struct figure figure_memory(uint64_t bytes);
/* "whole", "4K", "1000": the set file's spelling. */
struct figure figure_layout(size_t page_bytes);
/* Three digits: "0.45", "12.3", "845". */
struct figure figure_speed(double mb_per_s);

#endif
