#include "report/stream.h"

#include <errno.h>
#include <string.h>

enum status report_finish(FILE *out, enum status status, struct reason *why)
{
	if (status == STATUS_NO_MEMORY)
		return reason_give(why, status, "report: out of memory");
	if (status != STATUS_OK)
		return status;
	if (fflush(out) != 0 || ferror(out))
		return reason_give(why, STATUS_IO,
				   "report: cannot be written: %s",
				   errno ? strerror(errno) : "unknown cause");
	return STATUS_OK;
}
