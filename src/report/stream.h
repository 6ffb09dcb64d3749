/* What every format does when it has written its last byte. */
#ifndef REPORT_STREAM_H
#define REPORT_STREAM_H

#include "base/status.h"

#include <stdio.h>

/*
 * Flushes. STATUS_IO: the stream refused bytes, now or before; status unless
 * it is STATUS_OK.
 */
MUST_USE enum status report_finish(FILE *out, enum status status,
				   struct reason *why);

#endif
