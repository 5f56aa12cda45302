/* ampwright: low-voltage DC power where there is no grid.
 * Made by `tests/run regenerate` from bindings-c/src; do not edit.
 *
 * Conventions. The caller owns everything it passes; nothing is allocated and nothing is retained after a
 * return. There are no globals: every function is re-entrant. Every pointer is checked. Inputs come first,
 * outputs last, and outputs are written only on AW_STATUS_OK. No call unwinds or aborts on any input. The
 * unit stands at the end of a name: one_way_m is in metres.
 *
 * Cautions. Batteries deliver thousands of amperes into a fault; DC arcs do not go out by themselves; charging
 * gives off hydrogen. Isolate and prove dead before work. Local codes and licensed practice decide, and the
 * text of each standard governs. A result of this library is a calculation, not a permission.
 */

#ifndef AMPWRIGHT_H
#define AMPWRIGHT_H

#include <stdint.h>

/**
 * First part of the version.
 */
#define AW_VERSION_MAJOR 0

/**
 * Second part of the version.
 */
#define AW_VERSION_MINOR 1

/**
 * Third part of the version.
 */
#define AW_VERSION_PATCH 0

/**
 * The whole version as one number that can be compared: major · 10000 + minor · 100 + patch.
 */
#define AW_VERSION_NUMBER 100

/**
 * Changes when a struct, a status number or the meaning of a function does.
 */
#define AW_ABI_VERSION 1

/**
 * Outcome of a call. Numbers never change meaning; retired ones stay reserved. 0 is success, 1–99 the call itself,
 * 100–199 an input, 200–299 no solution.
 */
enum aw_status
#if defined(__cplusplus) || __STDC_VERSION__ >= 202311L
  : int32_t
#endif // defined(__cplusplus) || __STDC_VERSION__ >= 202311L
 {
  /**
   * The outputs are written.
   */
  AW_STATUS_OK = 0,
  /**
   * A pointer that must not be NULL is.
   */
  AW_STATUS_NULL_POINTER = 1,
  /**
   * An input is NaN, infinite or outside its range.
   */
  AW_STATUS_OUT_OF_RANGE = 100,
  /**
   * Two inputs do not go together.
   */
  AW_STATUS_CONTRADICTION = 101,
  /**
   * An input is refused for a reason that has no number in this interface version.
   */
  AW_STATUS_REFUSED = 199,
  /**
   * The line cannot deliver the power asked of it.
   */
  AW_STATUS_NO_SOLUTION = 200,
};
#ifndef __cplusplus
#if __STDC_VERSION__ >= 202311L
typedef enum aw_status aw_status;
#else
typedef int32_t aw_status;
#endif // __STDC_VERSION__ >= 202311L
#endif // __cplusplus

/**
 * Two-conductor DC run, owned by the caller; read only during a call.
 */
typedef struct aw_cable_run {
  /**
   * Route, not the sum of both conductors; > 0.
   */
  double one_way_m;
  /**
   * One conductor; > 0.
   */
  double cross_section_mm2;
  /**
   * At operating temperature; > 0.
   */
  double resistivity_ohm_m;
} aw_cable_run;

#ifdef __cplusplus
extern "C" {
#endif // __cplusplus

/**
 * What a status means, as a sentence. Any number is taken, also one that this library does not know.
 *
 * @param[in] status  as a call returned it
 * @return static text in UTF-8, never NULL
 */
const char *aw_status_text(int32_t status);

/**
 * The interface version that the library was built with; compare it with the header's AW_ABI_VERSION.
 */
uint32_t aw_abi_version(void);

/**
 * Voltage drop at the far end, there and back. U = 2·l·ρ·I/A.
 *
 * @param[in]  run        not NULL
 * @param[in]  current_A  finite; the sign gives the direction
 * @param[out] drop_V     volts; untouched unless AW_STATUS_OK
 * @return AW_STATUS_OK, AW_STATUS_NULL_POINTER or AW_STATUS_OUT_OF_RANGE, also where the drop is too large for a double
 */
aw_status aw_voltage_drop(const struct aw_cable_run *run,
                          double current_A,
                          double *drop_V);

#ifdef __cplusplus
}  // extern "C"
#endif  // __cplusplus

#endif  /* AMPWRIGHT_H */
