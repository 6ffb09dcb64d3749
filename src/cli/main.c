#include <stdio.h>

int main(void)
{
	(void)puts("ratefloor " RATEFLOOR_VERSION);
	return 0;
}
