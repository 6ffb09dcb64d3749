/* Is the name meant found, and none invented where nothing is near? */
#include "corpus/suggest.h"

#include "support/near.h"

static const char *const names[] = {"name",    "gap-limit", "levels",
				    "layouts", "kitten",    "feed"};

static void near_names_are_found(void **state)
{
	(void)state;
	assert_string_equal(suggest_name("level", names, 6), "levels");
	assert_string_equal(suggest_name("gaplimit", names, 6), "gap-limit");
	assert_string_equal(suggest_name("gap_limt", names, 6), "gap-limit");
	assert_string_equal(suggest_name("layots", names, 6), "layouts");
	assert_string_equal(suggest_name("fed", names, 6), "feed");
	/* Two edits of six letters; sitting is three away (the classic
	 * example of the distance, from memory). */
	assert_string_equal(suggest_name("sittn", &names[4], 1), "kitten");
	assert_null(suggest_name("sitting", &names[4], 1));
}

static void far_names_are_not(void **state)
{
	(void)state;
	assert_null(suggest_name("colour", names, 6));
	assert_null(suggest_name("", names, 6));
	assert_null(suggest_name("x", names, 0));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(near_names_are_found),
		cmocka_unit_test(far_names_are_not),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
