/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The ledger's tables: all of the design, and which of it exists.
 *
 *   MACHINE ROWS: found again by anyone from the same frame; content id = BLAKE2b of what they were made from;
 *   put in once, never changed, outside the log. They travel only with the acts that cite them.
 *
 *     frame --< run >-- method            a rule was run on a frame (an empty run, too)
 *       |  \--< hint --- measure          outlines by a rule, in order of strength
 *       |  \--< measure >-- method        one outline on one frame by one method
 *       |  \--< place                     where the file was last seen, its size and mtime (local, does not travel)
 *       |  \--< frame_over        later   this frame supersedes that one (newer processing)
 *     instrument                  later   origin of frames; its scale is a deed (`scale`), offered by `pair`
 *     complexity >-- measure, method      figures of one measured outline, given or not, by one complexity method
 *     outside --< outside_row             tables brought in: source, licence, checksum, map; content id of source and row number
 *     orientation                 later   what the orientation witness said of two frames
 *
 *   DEEDS: one act each, in the log, for ever.
 *
 *     replica --< act >-- after           (replica, seq) without gaps; Lamport clock; hash chain; what it saw and replaces
 *     have                                up to which seq each replica's acts are here: the version vector of a parcel
 *     waiting                     later   acts that came in a parcel before their predecessor or parents
 *     opening                     later   reveals of sealed opinions: outside the sequence, they prove themselves
 *     key                         later   public keys of persons: add, replace, withdraw, each an act
 *
 *   PROJECTIONS: what the log says now; `check` makes them anew and compares. One value a subject: that of its last act not
 *   undone, by (clock, replica id, seq). Two heads on one subject (after a merge) are a clash until an act names both.
 *
 *     kind of act   subject                        table
 *     begin         replica                        replica
 *     person        person                         person
 *     keep          region, frame, person          region, mark    two people never clash over an outline
 *     withdraw      region, frame, person          mark
 *     drop          hint, person                   dropped
 *     class         region, frame, person          class
 *     note          region, person                 note
 *     resolve       region, person (of the note)   resolved       that text of that note is settled; another text is open again
 *     shift         shift                          shift          a desk handed over; what came later is new to the next
 *     geometry      frame, person                  geometry           a person's correction of a frame; "" = back to the header
 *     label         region, person                 fact              a person's own name of a region
 *     external      region, person                 fact              its number in somebody else's list
 *     undo, redo    that of the act named          deed
 *     acts done as one (a split: two marks) name the first of them in their bodies: `bundle`; they are undone as one
 *     renumber      region                 later   region.number      two replicas with one letter
 *     link, cut     two sightings          tie     these marks or hints are one region, or are not: in one passage, or on later rotations
 *     scale         instrument                     scale          what its field is multiplied by to be like another's; none = taken back
 *     divide        study, minimum, hemisphere     divide         points as drawn, whether polarity was in sight; none = computed again
 *     study         study (of its name)    study           a version of a study, sieve included; the last one stands
 *     edition       study, edition         edition         a named, checksummed state of a study with its figures
 *     case          case                   later   docket_case        what the docket found, its evidence, controls with seed
 *     call          case                   later   who is asked to judge
 *     opinion       case, person           later   opinion            a seal only; the opening is in `opening`
 *     ruling        case                   later   ruling             decision and reasons; two heads = clash
 *     settle        any                    later   names the heads it settles in `after`
 *
 *   LOCAL: setting (ledger id, letter), draft (strokes between keeps), place. They do not travel.
 *   DERIVED: point (the wings) and the blocks pack and brief, kept in the transaction that changes a mark or hint; passage with member, linked, tied and
 *   passage_return, which follow makes from points and ties (content id of method, vantage and first sighting).
 *
 * Several people working apart: each copy of the file writes under its own replica (tf-ledger-replica.c), acts are merged by
 * (replica, seq), machine rows by content id; keys inside a file are local integers and never leave it.
 *
 * Texts are UTF-8; times are seconds of Terrestrial Time since J2000.0 with the ISO text in UTC beside; angles deg, flux Mx, field
 * G, lengths Mm; no value is NULL. What is judged (cycle, verdict) is never stored.
 */

#include "tf-ledger-private.h"

#define LOG_SQL                                                                                    \
  "CREATE TABLE setting (key TEXT PRIMARY KEY, value TEXT NOT NULL) STRICT, WITHOUT ROWID;"        \
  "CREATE TABLE replica (no INTEGER PRIMARY KEY, "                                                 \
  "id BLOB NOT NULL UNIQUE CHECK (length (id) = 16), letter TEXT NOT NULL, "                       \
  "born INTEGER NOT NULL) STRICT;"                                                                 \
  "CREATE TABLE act (replica INTEGER NOT NULL REFERENCES replica (no), "                           \
  "seq INTEGER NOT NULL CHECK (seq > 0), clock INTEGER NOT NULL, wall INTEGER NOT NULL, "          \
  "kind TEXT NOT NULL, subject BLOB NOT NULL, body BLOB NOT NULL, before BLOB NOT NULL, "          \
  "hash BLOB NOT NULL, PRIMARY KEY (replica, seq)) STRICT;"                                        \
  "CREATE INDEX act_subject ON act (subject, clock);"                                              \
  "CREATE INDEX act_clock ON act (clock);"                                                         \
  "CREATE TABLE after (replica INTEGER NOT NULL, seq INTEGER NOT NULL, "                           \
  "p_replica INTEGER NOT NULL, p_seq INTEGER NOT NULL, PRIMARY KEY (replica, seq, p_replica, "     \
  "p_seq), FOREIGN KEY (replica, seq) REFERENCES act (replica, seq), FOREIGN KEY (p_replica, "     \
  "p_seq) REFERENCES act (replica, seq)) STRICT, WITHOUT ROWID;"                                   \
  "CREATE INDEX after_p ON after (p_replica, p_seq);"                                              \
  "CREATE TABLE have (replica INTEGER PRIMARY KEY REFERENCES replica (no), "                       \
  "upto INTEGER NOT NULL) STRICT;"

#define POLE_SQL(p)                                                                                \
  p "_flux_mx REAL, " p "_flux_sigma_mx REAL, " p "_flux_noise_mx REAL, " p "_lon_deg REAL, "      \
  p "_carrington_lon_deg REAL, " p "_lat_deg REAL, " p "_place_sigma_deg REAL, " p                 \
  "_place_noise_deg REAL, " p "_rms_radius_deg REAL, " p "_pixels INTEGER, " p                     \
  "_area_msh REAL, " p "_pinned INTEGER,"

#define MACHINE_SQL                                                                                \
  "CREATE TABLE method (id INTEGER PRIMARY KEY, text TEXT NOT NULL UNIQUE) STRICT;"                \
  "CREATE TABLE frame (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, "                         \
  "checksum TEXT NOT NULL, hdu INTEGER NOT NULL, plane INTEGER NOT NULL, kind TEXT NOT NULL, "     \
  "role TEXT NOT NULL, time REAL, time_text TEXT, time_source TEXT NOT NULL, "                     \
  "instrument TEXT NOT NULL, vantage TEXT NOT NULL, simulated INTEGER NOT NULL, "                  \
  "noise_gauss REAL, refusal TEXT, info TEXT NOT NULL, path TEXT NOT NULL, "                       \
  "digest BLOB) STRICT;"                                                                           \
  "CREATE INDEX frame_time ON frame (time);"                                                       \
  "CREATE INDEX frame_checksum ON frame (checksum);"                                               \
  "CREATE TABLE place (path TEXT NOT NULL, frame INTEGER NOT NULL REFERENCES frame (id), "         \
  "size INTEGER NOT NULL, mtime INTEGER NOT NULL, PRIMARY KEY (path, frame)) STRICT, "             \
  "WITHOUT ROWID;"                                                                                 \
  "CREATE TABLE run (id INTEGER PRIMARY KEY, frame INTEGER NOT NULL REFERENCES frame (id), "       \
  "rule INTEGER NOT NULL REFERENCES method (id), "                                                 \
  "method INTEGER NOT NULL REFERENCES method (id), n INTEGER NOT NULL, UNIQUE (frame, "            \
  "rule)) STRICT;"                                                                                 \
  "CREATE TABLE measure (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, "                       \
  "frame INTEGER NOT NULL REFERENCES frame (id), "                                                 \
  "method INTEGER NOT NULL REFERENCES method (id), program TEXT NOT NULL, time REAL, "             \
  "time_text TEXT, year REAL, field_used INTEGER NOT NULL, floor_kind INTEGER NOT NULL, "          \
  "floor_gauss REAL, noise_gauss REAL, noise_flux_mx REAL, scale REAL, " POLE_SQL ("positive")     \
  POLE_SQL ("negative") " leading INTEGER NOT NULL, leading_sure INTEGER NOT NULL, "               \
  "witness_a INTEGER, witness_b INTEGER, witness_c INTEGER, lat_deg REAL, "                        \
  "carrington_lon_deg REAL, stonyhurst_lon_deg REAL, cmd_deg REAL, mu REAL, "                      \
  "axis_bearing_deg REAL, axis_tilt_deg REAL, tilt_noise_deg REAL, tilt_outline_deg REAL, "        \
  "tilt_floor_deg REAL, tilt_sigma_deg REAL, separation_deg REAL, separation_sigma_deg REAL, "     \
  "separation_noise_deg REAL, separation_mm REAL, compactness REAL, pieces INTEGER, "              \
  "flux_unsigned_mx REAL, imbalance REAL, ephemeral INTEGER NOT NULL, "                            \
  "axial_dipole_gauss REAL, axial_dipole_sigma_gauss REAL, axial_dipole_poles_gauss REAL, "        \
  "notes TEXT NOT NULL, cautions TEXT NOT NULL, digest BLOB) STRICT;"                              \
  "CREATE INDEX measure_frame ON measure (frame);"                                                 \
  "CREATE TABLE hint (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, "                          \
  "frame INTEGER NOT NULL REFERENCES frame (id), "                                                 \
  "rule INTEGER NOT NULL REFERENCES method (id), ordinal INTEGER NOT NULL, "                       \
  "unipolar INTEGER NOT NULL, outline TEXT NOT NULL, "                                             \
  "measure INTEGER NOT NULL REFERENCES measure (id), notes TEXT NOT NULL, "                        \
  "digest BLOB) STRICT;"                                                                           \
  "CREATE INDEX hint_frame ON hint (frame);"

/* The tables that check makes anew, a script a version. deed.undone: 0 stands; 1 undone; 2 undone for good, because a new deed came. */
static const char projection_1[] =
    "CREATE TABLE person (id INTEGER PRIMARY KEY, uid BLOB NOT NULL UNIQUE, "
    "name TEXT NOT NULL) STRICT;"
    "CREATE TABLE deed (replica INTEGER NOT NULL, seq INTEGER NOT NULL, "
    "person INTEGER NOT NULL REFERENCES person (id), undone INTEGER NOT NULL, "
    "PRIMARY KEY (replica, seq)) STRICT, WITHOUT ROWID;"
    "CREATE INDEX deed_person ON deed (person, replica, undone, seq);"
    "CREATE TABLE region (id INTEGER PRIMARY KEY, uid BLOB NOT NULL UNIQUE, "
    "number TEXT NOT NULL) STRICT;"
    "CREATE INDEX region_number ON region (substr (number, 1, 6), CAST (substr (number, "
    "7) AS INTEGER));"
    "CREATE TABLE mark (id INTEGER PRIMARY KEY, uid BLOB NOT NULL UNIQUE, "
    "replica INTEGER NOT NULL, seq INTEGER NOT NULL, "
    "region INTEGER NOT NULL REFERENCES region (id), "
    "frame INTEGER NOT NULL REFERENCES frame (id), "
    "person INTEGER NOT NULL REFERENCES person (id), origin INTEGER NOT NULL, "
    "hint INTEGER REFERENCES hint (id), follows INTEGER REFERENCES mark (id), "
    "outline TEXT NOT NULL, measure INTEGER NOT NULL REFERENCES measure (id), "
    "label TEXT NOT NULL, live INTEGER NOT NULL, UNIQUE (replica, seq)) STRICT;"
    "CREATE INDEX mark_frame ON mark (frame, live);"
    "CREATE INDEX mark_region ON mark (region, live);"
    "CREATE INDEX mark_hint ON mark (hint, live) WHERE hint IS NOT NULL;"
    "CREATE TABLE dropped (hint INTEGER NOT NULL REFERENCES hint (id), "
    "person INTEGER NOT NULL REFERENCES person (id), PRIMARY KEY (hint, person)) STRICT, "
    "WITHOUT ROWID;"
    "CREATE TABLE class (region INTEGER NOT NULL REFERENCES region (id), "
    "frame INTEGER NOT NULL REFERENCES frame (id), "
    "person INTEGER NOT NULL REFERENCES person (id), class TEXT NOT NULL, "
    "evidence TEXT NOT NULL, clock INTEGER NOT NULL, PRIMARY KEY (region, frame, "
    "person)) STRICT, WITHOUT ROWID;"
    "CREATE TABLE note (region INTEGER NOT NULL REFERENCES region (id), "
    "person INTEGER NOT NULL REFERENCES person (id), text TEXT NOT NULL, "
    "clock INTEGER NOT NULL, PRIMARY KEY (region, person)) STRICT, WITHOUT ROWID;"
    "CREATE TABLE point (hint INTEGER NOT NULL, mark INTEGER NOT NULL, "
    "frame INTEGER NOT NULL, region INTEGER NOT NULL, time REAL, year REAL, lat_deg REAL, "
    "flux_mx REAL, tilt_deg REAL, mu REAL, cmd_deg REAL, separation_deg REAL, "
    "imbalance REAL, leading INTEGER NOT NULL, leading_sure INTEGER NOT NULL, "
    "unipolar INTEGER NOT NULL, straddles INTEGER NOT NULL, "
    "witnesses_differ INTEGER NOT NULL, PRIMARY KEY (hint, mark)) STRICT, WITHOUT ROWID;"
    "CREATE INDEX point_frame ON point (frame, hint);";

static const char projection_2[]
    = "CREATE TABLE resolved (region INTEGER NOT NULL REFERENCES region (id), "
      "author INTEGER NOT NULL REFERENCES person (id), text TEXT NOT NULL, "
      "person INTEGER NOT NULL REFERENCES person (id), clock INTEGER NOT NULL, "
      "PRIMARY KEY (region, author)) STRICT, WITHOUT ROWID;"
      "CREATE TABLE shift (id INTEGER PRIMARY KEY, uid BLOB NOT NULL UNIQUE, "
      "person INTEGER NOT NULL REFERENCES person (id), time REAL, clock INTEGER NOT NULL) STRICT;";

static const char projection_3[]
    = "CREATE TABLE geometry (frame INTEGER NOT NULL REFERENCES frame (id), "
      "person INTEGER NOT NULL REFERENCES person (id), text TEXT NOT NULL, "
      "clock INTEGER NOT NULL, PRIMARY KEY (frame, person)) STRICT, WITHOUT ROWID;";

static const char projection_4[]
    = "CREATE TABLE divide (study TEXT NOT NULL, cycle INTEGER NOT NULL, "
      "hemisphere INTEGER NOT NULL, points TEXT NOT NULL, shown INTEGER NOT NULL, "
      "person INTEGER NOT NULL REFERENCES person (id), clock INTEGER NOT NULL, "
      "PRIMARY KEY (study, cycle, hemisphere)) STRICT, WITHOUT ROWID;";

/* Every version of a study and every edition is a row; live: it stands. */
static const char projection_5[] =
    "CREATE TABLE study (id INTEGER PRIMARY KEY, uid BLOB NOT NULL, name TEXT NOT NULL, "
    "version INTEGER NOT NULL, checksum BLOB NOT NULL, text TEXT NOT NULL, "
    "replica INTEGER NOT NULL, seq INTEGER NOT NULL, live INTEGER NOT NULL, "
    "UNIQUE (replica, seq)) STRICT;"
    "CREATE INDEX study_uid ON study (uid, live);"
    "CREATE TABLE edition (id INTEGER PRIMARY KEY, uid BLOB NOT NULL, name TEXT NOT NULL, "
    "study TEXT NOT NULL, study_version INTEGER NOT NULL, checksum BLOB NOT NULL, "
    "text TEXT NOT NULL, replica INTEGER NOT NULL, seq INTEGER NOT NULL, live INTEGER NOT NULL, "
    "UNIQUE (replica, seq)) STRICT;"
    "CREATE INDEX edition_name ON edition (name, live);";

/* What people say of two sightings, by ids of marks and hints; a < b. cut 0: one region; 1: not. */
static const char projection_6[]
    = "CREATE TABLE tie (a BLOB NOT NULL, b BLOB NOT NULL, cut INTEGER NOT NULL, "
      "person INTEGER NOT NULL REFERENCES person (id), reason TEXT NOT NULL, clock INTEGER NOT NULL, "
      "PRIMARY KEY (a, b)) STRICT, WITHOUT ROWID;";

/* deed.bundle: seq of the first act of those done as one; 0 in deeds older than this version: alone. */
static const char projection_7[]
    = "ALTER TABLE deed ADD COLUMN bundle INTEGER NOT NULL DEFAULT 0;"
      "CREATE TABLE fact (region INTEGER NOT NULL REFERENCES region (id), "
      "person INTEGER NOT NULL REFERENCES person (id), what TEXT NOT NULL, text TEXT NOT NULL, "
      "clock INTEGER NOT NULL, PRIMARY KEY (region, person, what)) STRICT, WITHOUT ROWID;";

static const char projection_8[]
    = "CREATE TABLE scale (instrument TEXT PRIMARY KEY, reference TEXT NOT NULL, "
      "factor REAL NOT NULL, sigma REAL, evidence TEXT NOT NULL, "
      "person INTEGER NOT NULL REFERENCES person (id), clock INTEGER NOT NULL) STRICT, WITHOUT ROWID;";

/* Of points: derived, and not compared by rows: tf_pack_check(). */
static const char pack_sql[] = "CREATE TABLE pack (id INTEGER PRIMARY KEY, data BLOB) STRICT;"
                               "CREATE INDEX pack_spoilt ON pack (id) WHERE data IS NULL;";

/* Of what studies ask of marks and hints (tf-ledger-brief.h): likewise. */
static const char brief_sql[] = "CREATE TABLE brief (id INTEGER PRIMARY KEY, data BLOB) STRICT;"
                                "CREATE INDEX brief_spoilt ON brief (id) WHERE data IS NULL;";

const char *const tf_ledger_projections[]
    = { projection_1, projection_2, projection_3, projection_4, projection_5,
        projection_6, projection_7, projection_8, pack_sql,     brief_sql,    NULL };

#define LOCAL_SQL                                                                                  \
  "CREATE TABLE draft (frame INTEGER NOT NULL REFERENCES frame (id), "                             \
  "person INTEGER NOT NULL REFERENCES person (id), text TEXT NOT NULL, "                           \
  "saved INTEGER NOT NULL, PRIMARY KEY (frame, person)) STRICT, WITHOUT ROWID;"

/* A pole's column by which of the two leads: +1 the leading, -1 the following. */
#define BY_POLE(side, column)                                                                      \
  "CASE e.leading * " side " WHEN 1 THEN e.positive_" column " WHEN -1 THEN e.negative_"           \
  column " END"

#define FLAT_SQL                                                                                   \
  " f.path AS frame, f.checksum AS frame_checksum, t.text AS method, "                             \
  "e.program AS program_version, "                                                                 \
  "CASE e.field_used WHEN 0 THEN 'radial' WHEN 1 THEN 'as observed' ELSE 'potential' END AS field_used, " \
  "CASE e.ephemeral WHEN 1 THEN 'ephemeral' ELSE 'region' END AS size, e.time_text AS time, "      \
  "f.time_source AS time_source, f.kind AS kind, f.instrument AS instrument, "                     \
  "e.scale AS scale, "

#define FLAT_SQL_2                                                                                 \
  " f.vantage AS vantage, " BY_POLE ("1", "lat_deg") " AS leading_lat_deg, "                       \
  BY_POLE ("1", "carrington_lon_deg") " AS leading_carrington_lon_deg, "                           \
  BY_POLE ("-1", "lat_deg") " AS following_lat_deg, " BY_POLE ("-1", "carrington_lon_deg")         \
  " AS following_carrington_lon_deg, e.lat_deg AS lat_deg, e.cmd_deg AS cmd_deg, "                 \
  "e.stonyhurst_lon_deg AS stonyhurst_lon_deg, e.carrington_lon_deg AS carrington_lon_deg, "       \
  "e.mu AS mu, e.axis_bearing_deg AS axis_bearing_deg, e.axis_tilt_deg AS axis_tilt_deg, "         \
  "e.tilt_sigma_deg AS tilt_sigma_deg, e.separation_deg AS separation_deg, "                       \
  "e.separation_sigma_deg AS separation_sigma_deg, e.separation_mm AS separation_mm, "             \
  "e.compactness AS compactness, e.pieces AS pieces, e.leading AS leading_polarity, "              \
  "e.leading_sure AS leading_sure, e.flux_unsigned_mx AS flux_unsigned_mx, "                       \
  "e.positive_flux_mx AS flux_positive_mx, e.negative_flux_mx AS flux_negative_mx, "               \
  "e.imbalance AS imbalance, e.positive_area_msh + e.negative_area_msh AS magnetic_area_msh, "

#define FLAT_SQL_3                                                                                 \
  " AS class, e.axial_dipole_gauss AS axial_dipole_gauss, e.floor_gauss AS floor_gauss, "          \
  "CASE e.floor_kind WHEN 0 THEN 'local' ELSE 'even' END AS floor_kind, "                          \
  "e.cautions AS cautions "

/* The two views of the flat columns; @columns and @join: what later versions add. */
#define OWN_LABEL   "m.label"
#define MARK_ITSELF "lower (hex (m.uid))"
#define MARKS_VIEW_SQL(passage, label, columns, join)                                              \
  "CREATE VIEW marks AS SELECT g.number AS region, " passage " AS passage, "                       \
  "lower (hex (m.uid)) AS mark, "                                                                  \
  "CASE m.origin WHEN 0 THEN 'kept as hinted' WHEN 1 THEN 'changed' ELSE 'drawn new' END AS origin, " \
  label " AS label," FLAT_SQL " p.name AS person, " FLAT_SQL_2 " coalesce ((SELECT c.class "      \
  "FROM class c WHERE c.region = m.region AND c.frame = m.frame AND c.person = m.person), "        \
  "(SELECT c.class FROM class c "                                                                  \
  "WHERE c.region = m.region AND c.frame = m.frame ORDER BY c.clock DESC LIMIT 1))" FLAT_SQL_3     \
  columns "FROM mark m JOIN region g ON g.id = m.region JOIN person p ON p.id = m.person "         \
  "JOIN measure e ON e.id = m.measure JOIN frame f ON f.id = m.frame "                             \
  "JOIN method t ON t.id = e.method " join "WHERE m.live;"
#define HINTS_VIEW_SQL(passage, columns, join)                                                     \
  "CREATE VIEW hints AS SELECT NULL AS region, " passage " AS passage, lower (hex (h.cid)) AS mark, " \
  "'hint' AS origin, NULL AS label, " FLAT_SQL " NULL AS person, " FLAT_SQL_2 " NULL"              \
  FLAT_SQL_3 columns "FROM point q JOIN hint h ON h.id = q.mark JOIN measure e ON e.id = h.measure " \
  "JOIN frame f ON f.id = h.frame JOIN method t ON t.id = e.method " join "WHERE q.hint = 1;"

#define VIEW_SQL                                                                                   \
  MARKS_VIEW_SQL (MARK_ITSELF, OWN_LABEL, "", "")                                                  \
  HINTS_VIEW_SQL ("NULL", "", "")                                                                  \
  "CREATE VIEW frames AS SELECT f.path AS frame, f.checksum AS frame_checksum, f.hdu AS hdu, "     \
  "f.plane AS plane, f.kind AS kind, f.role AS role, f.time_text AS time, "                        \
  "f.time_source AS time_source, f.instrument AS instrument, f.vantage AS vantage, "               \
  "f.noise_gauss AS noise_gauss, f.refusal AS refusal, f.simulated AS simulated, "                 \
  "(SELECT count (*) FROM point q WHERE q.frame = f.id AND q.hint = 0) AS marks, "                 \
  "(SELECT count (*) FROM point q WHERE q.frame = f.id AND q.hint = 1) AS hints FROM frame f;"     \
  "CREATE VIEW regions AS SELECT g.number AS region, lower (hex (g.uid)) AS region_id, "           \
  "count (*) AS marks, min (e.time_text) AS first_time, max (e.time_text) AS last_time, "          \
  "avg (e.lat_deg) AS mean_lat_deg, max (e.flux_unsigned_mx) AS greatest_flux_unsigned_mx "        \
  "FROM region g JOIN mark m ON m.region = g.id AND m.live "                                       \
  "JOIN measure e ON e.id = m.measure GROUP BY g.id;"                                              \
  "CREATE VIEW journal AS SELECT lower (hex (r.id)) AS replica, a.seq AS seq, "                    \
  "a.clock AS clock, strftime ('%Y-%m-%dT%H:%M:%fZ', a.wall / 1000.0, 'unixepoch') AS wall, "      \
  "a.kind AS kind, p.name AS person, lower (hex (a.subject)) AS subject, coalesce (d.undone, "     \
  "0) > 0 AS undone, CAST (a.body AS TEXT) AS body FROM act a "                                    \
  "JOIN replica r ON r.no = a.replica LEFT "                                                       \
  "JOIN deed d ON d.replica = a.replica AND d.seq = a.seq LEFT "                                   \
  "JOIN person p ON p.id = d.person ORDER BY a.clock, r.id, a.seq;"

/* -- version 2: complexity and shifts ----------------------------------------------------------- */
#define COMPLEXITY_SQL                                                                             \
  "CREATE TABLE complexity (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, "                    \
  "measure INTEGER NOT NULL REFERENCES measure (id), "                                             \
  "method INTEGER NOT NULL REFERENCES method (id), program TEXT NOT NULL, "                        \
  "given INTEGER NOT NULL, mu REAL, r_mx REAL, strong_gradient_length_mm REAL, "                   \
  "gradient_weighted_gauss REAL, flux_near_mx REAL, strong_pieces INTEGER, "                       \
  "delta_candidate INTEGER, digest BLOB) STRICT;"                                                  \
  "CREATE INDEX complexity_measure ON complexity (measure);"

#define COMPLEXITY_COLUMNS                                                                         \
  ", x.r_mx AS r_schrijver_mx, x.strong_gradient_length_mm AS strong_gradient_length_mm, "         \
  "x.gradient_weighted_gauss AS gradient_weighted_length_gauss, "                                  \
  "x.flux_near_mx AS flux_near_line_mx, x.strong_pieces AS strong_pieces, "                        \
  "x.delta_candidate AS delta_candidate, x.mu AS complexity_mu "
#define COMPLEXITY_JOIN                                                                            \
  "LEFT JOIN complexity x ON x.id = (SELECT max (y.id) FROM complexity y "                         \
  "WHERE y.measure = e.id) "

static const char version_2_views[]
    = "DROP VIEW marks; DROP VIEW hints; "
    MARKS_VIEW_SQL (MARK_ITSELF, OWN_LABEL, COMPLEXITY_COLUMNS, COMPLEXITY_JOIN)
    HINTS_VIEW_SQL ("NULL", COMPLEXITY_COLUMNS, COMPLEXITY_JOIN);

/* -- version 6: passages ------------------------------------------------------------------------
 * linked, member, passage and passage_return are what follow made, in order of dependence; tied is what it took into
 * account of people's links and cuts. time: at the Sun. */
#define PASSAGE_SQL                                                                                \
  "CREATE TABLE passage (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, "                       \
  "vantage TEXT NOT NULL, first_time REAL, last_time REAL, first_hint INTEGER NOT NULL, "          \
  "first_mark INTEGER NOT NULL, last_hint INTEGER NOT NULL, last_mark INTEGER NOT NULL, "          \
  "n_frames INTEGER NOT NULL, born INTEGER NOT NULL, ended INTEGER NOT NULL, "                     \
  "split_from INTEGER NOT NULL, merged_into INTEGER NOT NULL, same INTEGER NOT NULL) STRICT;"      \
  "CREATE INDEX passage_same ON passage (same);"                                                   \
  "CREATE INDEX passage_time ON passage (last_time);"                                              \
  "CREATE TABLE member (hint INTEGER NOT NULL, mark INTEGER NOT NULL, "                            \
  "passage INTEGER NOT NULL, time REAL, PRIMARY KEY (hint, mark)) STRICT, WITHOUT ROWID;"          \
  "CREATE INDEX member_passage ON member (passage, time);"                                         \
  "CREATE INDEX member_time ON member (time);"                                                     \
  "CREATE TABLE linked (a_hint INTEGER NOT NULL, a_mark INTEGER NOT NULL, "                        \
  "b_hint INTEGER NOT NULL, b_mark INTEGER NOT NULL, kind INTEGER NOT NULL, overlap REAL, "        \
  "PRIMARY KEY (a_hint, a_mark, b_hint, b_mark, kind)) STRICT, WITHOUT ROWID;"                     \
  "CREATE INDEX linked_b ON linked (b_hint, b_mark);"                                              \
  "CREATE TABLE passage_return (earlier INTEGER NOT NULL, later INTEGER NOT NULL, lon_deg REAL, "  \
  "lat_deg REAL, PRIMARY KEY (earlier, later)) STRICT, WITHOUT ROWID;"                             \
  "CREATE TABLE tied (a BLOB NOT NULL, b BLOB NOT NULL, cut INTEGER NOT NULL, "                    \
  "PRIMARY KEY (a, b)) STRICT, WITHOUT ROWID;"

#define MARK_PASSAGE                                                                               \
  "lower (hex (coalesce ((SELECT q.cid FROM member b JOIN passage q ON q.id = b.passage "          \
  "WHERE b.hint = 0 AND b.mark = m.id), (SELECT q.cid FROM member b JOIN passage q "               \
  "ON q.id = b.passage WHERE b.hint = 1 AND b.mark = m.hint), m.uid)))"
#define HINT_PASSAGE                                                                               \
  "(SELECT lower (hex (q.cid)) FROM member b JOIN passage q ON q.id = b.passage "                  \
  "WHERE b.hint = 1 AND b.mark = h.id)"

static const char version_6_views[]
    = "DROP VIEW marks; DROP VIEW hints; "
    MARKS_VIEW_SQL (MARK_PASSAGE, OWN_LABEL, COMPLEXITY_COLUMNS, COMPLEXITY_JOIN)
    HINTS_VIEW_SQL (HINT_PASSAGE, COMPLEXITY_COLUMNS, COMPLEXITY_JOIN)
    "CREATE VIEW passages AS SELECT lower (hex (q.cid)) AS passage, q.vantage AS vantage, "
    "q.n_frames AS frames, "
    "(SELECT lower (hex (s.cid)) FROM passage s WHERE s.id = q.same) AS first_passage_of_region, "
    "CASE q.born WHEN 1 THEN 'on disk' WHEN 2 THEN 'over the limb' WHEN 3 THEN 'far side' "
    "ELSE 'unknown' END AS born, CASE q.ended WHEN 1 THEN 'on disk' WHEN 2 THEN 'over the limb' "
    "WHEN 3 THEN 'far side' ELSE 'unknown' END AS ended FROM passage q;";

static const char *const version_1[] = { LOG_SQL MACHINE_SQL, projection_1, LOCAL_SQL VIEW_SQL, NULL };

static const char *const version_2[] = { COMPLEXITY_SQL, projection_2, version_2_views, NULL };

static const char *const version_3[] = { projection_3, NULL };

static const char *const version_4[] = { projection_4, NULL };

/* -- version 5: outside tables, studies --------------------------------------------------------- */
/* Of an outside row what studies and the wings need stands in columns; all it has stands in flat
 * (JSON of flat columns). grp: ordinal of the first row of its region. Ids of one table's rows run
 * on. */
#define OUTSIDE_SQL                                                                                \
  "CREATE TABLE outside (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, name TEXT NOT NULL, "   \
  "checksum TEXT NOT NULL, format TEXT NOT NULL, source TEXT NOT NULL, licence TEXT NOT NULL, "    \
  "about TEXT NOT NULL, columns TEXT NOT NULL, linking TEXT NOT NULL, program TEXT NOT NULL, "     \
  "n_rows INTEGER NOT NULL, n_left INTEGER NOT NULL, digest BLOB) STRICT;"                         \
  "CREATE TABLE outside_row (id INTEGER PRIMARY KEY, cid BLOB NOT NULL UNIQUE, "                   \
  "outside INTEGER NOT NULL REFERENCES outside (id), ordinal INTEGER NOT NULL, "                   \
  "place INTEGER NOT NULL, grp INTEGER NOT NULL, region TEXT NOT NULL, passage TEXT NOT NULL, "    \
  "time REAL, year REAL, flat TEXT NOT NULL, hinted INTEGER NOT NULL, leading INTEGER NOT NULL, "  \
  "leading_sure INTEGER NOT NULL, lat_deg REAL, leading_lat_deg REAL, following_lat_deg REAL, "    \
  "cmd_deg REAL, mu REAL, axis_tilt_deg REAL, axis_bearing_deg REAL, tilt_sigma_deg REAL, "        \
  "separation_deg REAL, separation_sigma_deg REAL, flux_unsigned_mx REAL, imbalance REAL, "        \
  "compactness REAL, axial_dipole_gauss REAL, carrington_lon_deg REAL, "                           \
  "stonyhurst_lon_deg REAL, floor_gauss REAL, digest BLOB, UNIQUE (outside, ordinal)) STRICT;"     \
  "CREATE VIEW outside_rows AS SELECT s.name AS table_name, s.source AS source, "                  \
  "s.licence AS licence, o.place AS source_row, o.region AS region, o.passage AS passage, "        \
  "lower (hex (o.cid)) AS mark, 'outside' AS origin, o.year AS time_year, o.lat_deg, o.cmd_deg, "  \
  "o.mu, o.axis_tilt_deg, o.axis_bearing_deg, o.separation_deg, o.flux_unsigned_mx, "              \
  "o.imbalance, o.leading AS leading_polarity, o.leading_sure, o.flat AS flat "                    \
  "FROM outside_row o JOIN outside s ON s.id = o.outside;"

static const char *const version_5[] = { OUTSIDE_SQL, projection_5, NULL };

static const char *const version_6[] = { PASSAGE_SQL, projection_6, version_6_views, NULL };

/* -- version 7: facts about a region, deeds done as one --------------------------------------------- */
/* One's own fact, else the newest of anybody's. */
#define FACT_SQL(what)                                                                             \
  "coalesce ((SELECT z.text FROM fact z WHERE z.region = m.region AND z.person = m.person AND "    \
  "z.what = '" what "'), (SELECT z.text FROM fact z WHERE z.region = m.region AND z.what = '" what \
  "' ORDER BY z.clock DESC LIMIT 1)"

static const char version_7_views[]
    = "DROP VIEW marks; DROP VIEW hints; "
    MARKS_VIEW_SQL (MARK_PASSAGE, FACT_SQL ("label") ", m.label)",
                    COMPLEXITY_COLUMNS ", " FACT_SQL ("external") ") AS external_number ", COMPLEXITY_JOIN)
    HINTS_VIEW_SQL (HINT_PASSAGE, COMPLEXITY_COLUMNS ", NULL AS external_number ", COMPLEXITY_JOIN);

static const char *const version_7[] = { projection_7, version_7_views, NULL };

static const char *const version_8[] = { projection_8, NULL };

static const char *const version_9[] = { pack_sql, NULL };

static const char brief_frame_sql[]
    = "CREATE INDEX frame_brief ON frame (id, instrument, kind, simulated);";

static const char *const version_10[] = { brief_sql, brief_frame_sql, NULL };

const TfMigration tf_ledger_migrations[] = {
  { 1, version_1 },
  { 2, version_2 },
  { 3, version_3 },
  { 4, version_4 },
  { 5, version_5 },
  { 6, version_6 },
  { 7, version_7 },
  { 8, version_8 },
  { 9, version_9 },
  { 10, version_10 },
  { 0, NULL },
};
