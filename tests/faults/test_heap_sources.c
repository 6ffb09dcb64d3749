/* Does every source of the frozen list survive each failing allocation? */
#include "faults/inject.h"
#include "source/frozen.h"

#include "support/near.h"

static enum status rate_anew(void *context)
{
	const struct frozen_source *const *entry = context;
	struct source_model model;
	struct known_rate rate;
	enum status status;

	TRY((*entry)->init(&model, NULL));
	status = source_model_rate(&model, &rate, NULL);
	source_model_release(&model);
	return status;
}

static void sources_survive_each_failing_allocation(void **state)
{
	const struct frozen_source *entry;

	(void)state;
	for (size_t i = 0; (entry = frozen_at(i)); i++)
		inject_each(rate_anew, &entry, 40);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(sources_survive_each_failing_allocation),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
