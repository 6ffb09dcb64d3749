#include "report/json_value.h"

#include <stdio.h>

#include "report/clean.h"

/* Cleaning makes three bytes of one; reasons and origins fit. */
#define TEXT_BYTES (3 * 4 * REASON_BYTES)

void json_begin(struct json_maker *maker)
{
	*maker = (struct json_maker){.object = json_object()};
	maker->failed = !maker->object;
}

void json_put(struct json_maker *maker, const char *key, json_t *value)
{
	/* Takes the value over in any case. */
	if (json_object_set_new(maker->object, key, value) != 0)
		maker->failed = true;
}

void json_put_text(struct json_maker *maker, const char *key, const char *text)
{
	char clean[TEXT_BYTES];

	(void)clean_utf8(text ? text : "", clean, sizeof(clean));
	json_put(maker, key, json_string(clean));
}

void json_put_reason(struct json_maker *maker, const char *key,
		     const char *text)
{
	if (text && text[0])
		json_put_text(maker, key, text);
	else
		json_put(maker, key, json_null());
}

void json_put_bool(struct json_maker *maker, const char *key, bool value)
{
	json_put(maker, key, value ? json_true() : json_false());
}

void json_put_count(struct json_maker *maker, const char *key, uint64_t count)
{
	char digits[24];

	if (count <= INT64_MAX) {
		json_put(maker, key, json_integer((json_int_t)count));
		return;
	}
	(void)snprintf(digits, sizeof(digits), "%llu",
		       (unsigned long long)count);
	json_put(maker, key, json_string(digits));
}

void json_put_real(struct json_maker *maker, const char *key, bool known,
		   double value)
{
	bool finite = value - value == 0;

	json_put(maker, key, known && finite ? json_real(value) : json_null());
}

void json_put_known_count(struct json_maker *maker, const char *key, bool known,
			  uint64_t count)
{
	if (known)
		json_put_count(maker, key, count);
	else
		json_put(maker, key, json_null());
}

json_t *json_done(struct json_maker *maker)
{
	json_t *object = maker->object;

	if (maker->failed) {
		json_decref(object);
		object = NULL;
	}
	*maker = (struct json_maker){0};
	return object;
}
