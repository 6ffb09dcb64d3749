#include "verdict/calibration_list.h"

const struct calibration_source calibration_sources[] = {
	{"iid", "i.i.d.", 1, true, false, false},
	{"chain", "chain", 2, true, false, false},
};

const size_t calibration_source_count =
	sizeof(calibration_sources) / sizeof(calibration_sources[0]);
