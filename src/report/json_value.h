/* JSON values that are never missing, never infinite and always UTF-8. */
#ifndef REPORT_JSON_VALUE_H
#define REPORT_JSON_VALUE_H

#include "base/status.h"

#include <jansson.h>
#include <stdbool.h>
#include <stdint.h>

/* An object being filled; a failure (no memory) sticks. */
struct json_maker {
	json_t *object; /* owned until json_done */
	bool failed;
};

void json_begin(struct json_maker *maker);
/* Keys keep the order in which they are put. A NULL value sticks as failure. */
void json_put(struct json_maker *maker, const char *key, json_t *value);
void json_put_text(struct json_maker *maker, const char *key, const char *text);
/* null for an empty text or NULL. */
void json_put_reason(struct json_maker *maker, const char *key,
		     const char *text);
void json_put_bool(struct json_maker *maker, const char *key, bool value);
/* Past 2^63 - 1, where JSON readers lose digits anyway, as text. */
void json_put_count(struct json_maker *maker, const char *key, uint64_t count);
/* null where unknown or not finite. */
void json_put_real(struct json_maker *maker, const char *key, bool known,
		   double value);
void json_put_known_count(struct json_maker *maker, const char *key, bool known,
			  uint64_t count);
/* The object, or NULL after a failure; the maker is empty afterwards. */
json_t *json_done(struct json_maker *maker);

#endif
