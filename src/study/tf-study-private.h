/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-bands.h"
#include "tf-ledger-scales.h"
#include "tf-study-again.h"
#include "tf-study.h"

G_BEGIN_DECLS

/** TfStudyFact: what a study asks of a row beside its sample row. */
typedef struct
{
  gint64 mark;            /* local key; of a hint negative; of an outside row 0 */
  const char *instrument; /* borrowed of the rows, or interned; NULL: not known */
  const char *source, *licence; /* likewise, of an outside row */
  double floor_gauss;
  gint8 even; /* the floor is an even one */
  gint8 is_hint, unipolar, model_map, simulated, outside;
  gint8 outside_hint; /* its source calls it a hint */
} TfStudyFact;

/** TfStudyRows: what a study reads, borrowed: sample rows, of which each one's number is its place
 * among the rows or facts. */
typedef struct
{
  const GPtrArray *rows; /* TfRow; NULL: none is there, or none was needed */
  TfSample *all;
  const GPtrArray *scales; /* TfKeptScale; NULL: none */
  const GArray *facts;     /* TfStudyFact; NULL: those of the rows */
  const struct _TfStudyTaken *taken; /* whose these all are; NULL: not known */
} TfStudyRows;

struct _TfStudyTaken
{
  GPtrArray *rows; /* whole rows; NULL: facts are enough */
  GArray *facts;
  TfSample *all;
  GPtrArray *scales;
  double floor;
  gboolean own_floor; /* the study's, not the ledger's */
  gboolean with_hints, with_scales;
  /* Without whole rows: those that lack the even floor a fifth lower and higher; those not of their own
   * measure; hints of the ledger, taken or not. */
  guint n_lacking[2], n_even, n_hints;
};

/** tf_study_fact: of the row of that number; of none: an outside one. */
TfStudyFact tf_study_fact (const TfStudyRows *rows, guint number);
TfStudyFact tf_study_fact_of_row (const TfRow *row);
/** tf_study_fact_has_floor: whether it was measured with the even floor @gauss (within 0.5 %), or came
 * in a table. */
gboolean tf_study_fact_has_floor (const TfStudyFact *fact, double gauss);
/** tf_study_take_with: (transfer full): what the study takes of a ledger, measured with that even floor
 * where it is; NaN or 0: each its own. */
struct _TfStudyTaken *
tf_study_take_with (const TfStudy *study, TfLedger *ledger, double floor, GError **error);
TfStudyRows tf_study_taken_rows (const struct _TfStudyTaken *taken);
/** tf_study_needs_whole_rows: whether its conditions ask for more than facts. */
gboolean tf_study_needs_whole_rows (const TfStudy *study);
/** tf_study_complain_empty: sets an error when there is nothing to judge. */
gboolean
tf_study_complain_empty (const TfStudy *study, guint n, TfLedger *ledger, GError **error);

/** TfStudyPlace: where a mark or hint of the ledger belongs, by local keys; 0: none. */
typedef struct
{
  gboolean is_hint;
  gint64 mark, region, passage, same;
  int born; /* TfEnd */
} TfStudyPlace;
/** tf_study_place_row: its region, passage and where it was born. */
void tf_study_place_row (TfSampleRow *row, const TfStudyPlace *place);

/** tf_study_sample_rows: (transfer full): ledger rows as sample rows. */
TfSample *tf_study_sample_rows (const GPtrArray *rows);
/** tf_study_scale: multiplies the fluxes of @all, numbered as @rows, by the kept scales of their
 * instruments; @on FALSE: divides by them again. Returns: how many rows have one. */
guint tf_study_scale (TfSample *all, const TfStudyRows *rows, gboolean on);
/** tf_study_unscaled: whether instruments are pooled in the picks without a scale between them: more
 * than one, and one at least that has neither a scale nor is a scale's reference. */
gboolean
tf_study_unscaled (const TfFindings *findings, const TfStudy *study, const TfStudyRows *rows);
/** tf_study_dup_divides: the moved divides of the study under its options. */
TfDivides *tf_study_dup_divides (const TfStudy *study);
/** tf_study_outside_row: the rest of tf_study_row() for a row that came in a table. */
void tf_study_outside_row (const TfRow *row, TfSampleRow *out);
/** tf_study_judge: (transfer full): a verdict for each row, as if every minimum had come @later_s
 * seconds later. */
TfVerdict *tf_study_judge (const TfStudy *study, const TfSample *sample, double later_s);
/** tf_study_judge_with: likewise; @workers: (nullable). */
TfVerdict *tf_study_judge_with (const TfStudy *study, const TfSample *sample, double later_s,
                                TfWorkers *workers);
/** tf_study_hold: cannot say where the passage changes. That is told once, under the study as
 * chosen: another cycle turns all marks of a passage alike. */
void tf_study_hold (const TfFindings *findings, const TfSample *sample, TfVerdict *verdicts);
/** tf_study_marks: (transfer full): the rows that pass the mark conditions, a part of rows->all, which
 * must live as long. @findings: (nullable):
 * counts what is left out by reason. */
TfSample *tf_study_marks (const TfStudy *study, const TfStudyRows *rows, TfFindings *findings);
/** tf_study_picks: (transfer full): one pick a passage of @marks, by the sampling rule, as far as it
 * passes the region conditions. @findings: (nullable): likewise, and the tally of the rule. */
TfSample *tf_study_picks (const TfStudy *study, const TfStudyRows *rows, const TfSample *marks,
                          TfFindings *findings);
/** tf_study_add_cautions: what must be said beside the numbers. */
void tf_study_add_cautions (TfFindings *findings, const TfStudy *study, const TfStudyRows *rows);
/** tf_study_copy_cautions: those of the same findings under other divides. */
void tf_study_copy_cautions (const TfNotes *before, const TfStudy *study, TfNotes *out);
/** tf_study_run_rows: (transfer full): sieve, sampling rule, verdicts and laws; @what_if: and the
 * other choices. */
TfFindings *tf_study_run_rows (const TfStudy *study, const TfStudyRows *rows, TfLedger *ledger,
                               double floor, gboolean what_if);
/** tf_study_count: one more of @key. */
void tf_study_count (GHashTable *counts, const char *key);
void tf_study_count_more (GHashTable *counts, const char *key, guint more);

/* Members of the `laws` document. */
void tf_study_build_interval (JsonBuilder *builder, const char *key, TfInterval interval);
void tf_study_build_cell (JsonBuilder *builder, int cycle, int hemisphere);
void tf_study_build_parts (JsonBuilder *builder, const TfFindings *findings);

/** tf_study_floor_of_noises: the even floor of those TfFrameNoise, G; NaN without. */
double tf_study_floor_of_noises (const GArray *noises);
/** tf_study_what_if: (element-type TfWhatIf): the share and the slope under other choices, each
 * alone, and into findings->cycle_choice the three ways of telling a cycle. @ledger: (nullable): for
 * what needs other measures or the hints. @workers: (nullable). */
GArray *tf_study_what_if (const TfStudy *study, const TfStudyRows *rows, TfFindings *findings,
                          TfLedger *ledger, TfWorkers *workers);

G_END_DECLS
