/* Drop of a cable run, and what happens when an input is wrong. Run by `tests/run c`. */
#include "ampwright.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static int failed = 0;
static int passed = 0;

static void check(int holds, const char *what) {
  if (holds) {
    passed++;
  } else {
    failed++;
    fprintf(stderr, "FAILED: %s\n", what);
  }
}

int main(void) {
  /* A pump 12 m away on 16 mm2 of copper at 20 degC (1/58 ohm mm2/m) draws 25 A. */
  const aw_cable_run run = {12.0, 16.0, 1.0 / 58e6};
  double drop_V = -1.0;
  aw_status status = aw_voltage_drop(&run, 25.0, &drop_V);
  if (status != AW_STATUS_OK) {
    fprintf(stderr, "%s\n", aw_status_text(status));
    return 1;
  }
  printf("drop %.3f V\n", drop_V);
  /* By hand: 2 * 12 * 25 / (58 * 16) = 0.64655. */
  check(fabs(drop_V - 0.64655172413793103) < 1e-15, "the drop by hand");

  /* An error leaves the output as it was. */
  aw_cable_run wrong = run;
  wrong.one_way_m = -3.0;
  drop_V = 7.0;
  check(aw_voltage_drop(&wrong, 25.0, &drop_V) == AW_STATUS_OUT_OF_RANGE, "a negative length is refused");
  check(aw_voltage_drop(&run, NAN, &drop_V) == AW_STATUS_OUT_OF_RANGE, "NaN is refused");
  check(aw_voltage_drop(&run, INFINITY, &drop_V) == AW_STATUS_OUT_OF_RANGE, "infinity is refused");
  wrong = run;
  wrong.cross_section_mm2 = 5e-324;
  check(aw_voltage_drop(&wrong, 25.0, &drop_V) == AW_STATUS_OUT_OF_RANGE, "an area that vanishes in m2 is refused");
  wrong = run;
  wrong.one_way_m = 1e308;
  check(aw_voltage_drop(&wrong, 1e308, &drop_V) == AW_STATUS_OUT_OF_RANGE, "an infinite drop is refused");
  check(aw_voltage_drop(NULL, 25.0, &drop_V) == AW_STATUS_NULL_POINTER, "no run");
  check(drop_V == 7.0, "the output is untouched after an error");
  check(aw_voltage_drop(&run, 25.0, NULL) == AW_STATUS_NULL_POINTER, "no output");

  check(strcmp(aw_status_text(AW_STATUS_OK), "ok") == 0, "text of a status");
  check(strlen(aw_status_text(-12345)) > 20, "text of an unknown status");
  check(strcmp(aw_status_text(AW_STATUS_OUT_OF_RANGE), aw_status_text(-12345)) != 0, "texts differ");
  check(aw_abi_version() == AW_ABI_VERSION, "header and library agree");
  check(sizeof(aw_status) == sizeof(int32_t), "a status has a size of its own");

  printf("%d passed, %d failed\n", passed, failed);
  return failed == 0 ? 0 : 1;
}
