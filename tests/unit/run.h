/* run.h - the main function that every unit test ends with */
#ifndef RG_TESTS_RUN_H
#define RG_TESTS_RUN_H
#include <check.h>
#include <stdlib.h>

static inline int run_suite(Suite *suite)
{
    SRunner *runner = srunner_create(suite);
    srunner_run_all(runner, CK_ENV);
    const int failed = srunner_ntests_failed(runner);
    srunner_free(runner);
    return failed ? EXIT_FAILURE : EXIT_SUCCESS;
}

#endif
