#include "cost/cell.h"

void cell_facts_release(struct cell_facts *facts)
{
	costs_release(&facts->flushed);
	*facts = (struct cell_facts){0};
}
