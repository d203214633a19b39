/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Somebody's tables: read, mapped, turned into our units and conventions, linked; what is wrong is
 * told with its place. */

#include "tf-bring.h"

#include <string.h>

#include "tf-check.h"
#include "tf-export.h"
#include "tf-json.h"
#include "tf-unit.h"
#include "test-rows.h"

static TfCells *
table_of (const char *text)
{
  g_autoptr (GError) error = NULL;
  TfCells *table = tf_cells_read_text (text, strlen (text), "made.csv", &error);
  g_assert_no_error (error);
  return table;
}

static TfBrought *
bring (const char *text, const char *map_text, gboolean alone)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfCells) table = table_of (text);
  g_autoptr (TfColumnMap) map
      = map_text != NULL ? tf_column_map_read (map_text, "made.map", &error) : NULL;
  g_assert_no_error (error);
  TfBringParams params = { .rows_alone = alone };
  TfBrought *b = tf_bring (table, map, &params, "made.csv", "0123456789abcdef", &error);
  g_assert_no_error (error);
  return b;
}

/* A number of the k-th entry; NaN when it has none. */
static double
number (const TfBrought *b, guint k, const char *name)
{
  g_autoptr (JsonNode) node
      = json_from_string (g_array_index (b->entries, TfOutsideEntry, k).flat, NULL);
  return tf_json_member_number (json_node_get_object (node), name);
}

static void
test_csv (void)
{
  g_autoptr (TfCells) t = table_of ("# source: an old book\r\n#\r\n"
                                    "a,\"b \"\"c\"\"\",d\r\n1,\"x,\r\ny\",\r\n2\r\n3,z,\"\"\r\n");
  g_assert_cmpstr (t->about->str, ==, "source: an old book\n");
  g_assert_cmpint (tf_cells_find (t, "b \"c\""), ==, 1);
  g_assert_cmpuint (t->rows->len, ==, 2);
  g_assert_cmpstr (((char **)t->rows->pdata[0])[1], ==, "x,\r\ny");
  g_assert_null (((char **)t->rows->pdata[0])[2]);
  g_assert_null (((char **)t->rows->pdata[1])[2]);
  g_assert_cmpuint (g_array_index (t->places, guint, 1), ==, 7);
  g_assert_cmpuint (t->faults->len, ==, 1);
  g_assert_cmpuint (g_array_index (t->faults, TfFault, 0).place, ==, 6);
}

static const struct
{
  const char *text, *words; /* of the message */
} not_tables[] = {
  { "", "empty" },
  { "a;b\n1;2\n", "commas" },
  { "a,a\n1,2\n", "“a”" },
  { "\"a,b\n", "never closed" },
  { "{\"rows\": 5}", "no table" },
  { "{\"rows\": [", "made" },
  { "<VOTABLE><RESOURCE></RESOURCE></VOTABLE>", "no TABLE" },
  { "<VOTABLE><RESOURCE><TABLE><FIELD name=\"a\" datatype=\"int\"/><DATA>", "line 1" },
  { "<VOTABLE><TABLE><FIELD name=\"a\" datatype=\"word\"/></TABLE></VOTABLE>", "word" },
  { "<VOTABLE><TABLE><FIELD name=\"a\" datatype=\"int\"/><DATA><BINARY><STREAM "
    "encoding=\"base64\">AAA=</STREAM></BINARY></DATA></TABLE></VOTABLE>",
    "row 1" },
  { "<VOTABLE><TABLE><FIELD name=\"a\" datatype=\"int\"/><DATA><BINARY><STREAM "
    "href=\"http://nowhere\"/></BINARY></DATA></TABLE></VOTABLE>",
    "TABLEDATA" },
};

static void
test_not_tables (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (not_tables); k++)
    {
      g_autoptr (GError) error = NULL;
      const char *text = not_tables[k].text;
      g_autoptr (TfCells) t = tf_cells_read_text (text, strlen (text), "made", &error);
      if (t != NULL)
        g_test_message ("this is a table: %s", text);
      g_assert_null (t);
      g_assert_error (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_READ);
      g_assert_true (g_str_has_prefix (error->message, "made: "));
      g_assert_nonnull (strstr (error->message, not_tables[k].words));
    }
}

/* int -1 null, float 1.5, "ab"; BINARY2 with its null bits; IVOA VOTable 1.4, 5.4. */
static void
test_binary (void)
{
  static const guchar rows[] = { 0x00, 0, 0, 0, 7,    0x3f, 0xc0, 0, 0, 0, 0, 0, 2, 'a', 'b',
                                 0x80, 0, 0, 0, 0,    0x7f, 0xc0, 0, 0, 0, 0, 0, 0 };
  g_autofree char *base64 = g_base64_encode (rows, sizeof rows);
  g_autofree char *text = g_strdup_printf (
      "<?xml version=\"1.0\"?><VOTABLE xmlns=\"x\"><RESOURCE><TABLE><FIELD name=\"n\" "
      "datatype=\"int\"/><FIELD name=\"x\" datatype=\"float\" unit=\"deg\"/><FIELD name=\"s\" "
      "datatype=\"char\" arraysize=\"*\"/><DATA><BINARY2><STREAM encoding=\"base64\">\n%s\n"
      "</STREAM></BINARY2></DATA></TABLE></RESOURCE></VOTABLE>",
      base64);
  g_autoptr (TfCells) t = table_of (text);
  g_assert_cmpuint (t->rows->len, ==, 2);
  char **one = t->rows->pdata[0], **two = t->rows->pdata[1];
  g_assert_cmpstr (one[0], ==, "7");
  g_assert_cmpstr (one[1], ==, "1.5");
  g_assert_cmpstr (one[2], ==, "ab");
  g_assert_null (two[0]);
  g_assert_null (two[1]);
  g_assert_null (two[2]);
  g_assert_cmpstr (g_array_index (t->columns, TfCellsColumn, 1).unit, ==, "deg");
}

static void
test_units (void)
{
  static const struct
  {
    const char *from, *to;
    double factor;
  } rows[] = {
    { "10**-8 Wb", "1e-8Wb", 1 },   { "Mx", "1e-8Wb", 1 },      { "10**21 Mx", "1e-8Wb", 1e21 },
    { "10^20 Mx", "1e-8Wb", 1e20 }, { "Wb", "1e-8Wb", 1e8 },    { "rad", "deg", 180 / G_PI },
    { "G", "1e-4T", 1 },            { "mT", "1e-4T", 10 },      { "km", "Mm", 1e-3 },
    { "10**-6", "1e-6", 1 },        { "arcmin", "deg", 1 / 60.0 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    tf_check_near (rows[k].from, tf_unit_factor (rows[k].from, rows[k].to), rows[k].factor,
                   1e-14 * rows[k].factor);
  tf_check_nan ("other kinds", tf_unit_factor ("deg", "Mm"));
  tf_check_nan ("no unit", tf_unit_factor ("parsec", "Mm"));
  tf_check_nan ("no number", tf_unit_factor ("10**x Mx", "1e-8Wb"));
}

/* Every convention a map can tell, on one row in the south. */
static void
test_conventions (void)
{
  static const struct
  {
    const char *map, *name;
    double value;
  } rows[] = {
    { "axis_tilt_deg = T", "axis_tilt_deg", 12 },
    { "axis_tilt_deg = T ; positive poleward", "axis_tilt_deg", -12 },
    { "axis_tilt_deg = T ; positive north", "axis_tilt_deg", 12 },  /* south: north is equatorward */
    { "axis_tilt_deg = T ; positive south", "axis_tilt_deg", -12 },
    { "axis_tilt_deg = T ; missing 12", "axis_tilt_deg", NAN },
    { "polarity_tilt_deg = G ; range 180", "axis_tilt_deg", 20 },
    { "polarity_tilt_deg = G ; range 180 ; positive poleward", "axis_tilt_deg", -20 },
    { "polarity_tilt_deg = G ; positive north", "axis_tilt_deg", 20 },
    { "polarity_tilt_deg = G ; positive south", "axis_tilt_deg", -20 },
    { "axis_tilt_deg = T\npolarity_tilt_deg = G ; positive south", "axis_tilt_deg", 12 },
    { "cmd_deg = L ; positive east", "cmd_deg", -40 },
    { "carrington_lon_deg = M", "carrington_lon_deg", 350 },
    { "stonyhurst_lon_deg = N", "stonyhurst_lon_deg", -170 },
    { "flux_unsigned_mx = F ; unit 10**21 Mx", "flux_unsigned_mx", 3e21 },
    { "leading_polarity = P", "leading_polarity", -1 },
    { "separation_deg = R ; unit rad", "separation_deg", 0.1 * 180 / G_PI },
  };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autofree char *map = g_strdup_printf ("# made\ntime_year = Y\nlat_deg = B\n%s\n", rows[k].map);
      g_autoptr (TfBrought) b = bring ("Y,B,T,G,L,M,N,F,P,R\n1950.5,-20,12,-160,40,-10,190,3,-,0.1\n",
                                       map, FALSE);
      if (isnan (rows[k].value))
        tf_check_nan (rows[k].map, number (b, 0, rows[k].name));
      else
        tf_check_near (rows[k].map, number (b, 0, rows[k].name), rows[k].value,
                       1e-12 * fabs (rows[k].value));
      tf_check_near ("time", g_array_index (b->entries, TfOutsideEntry, 0).time.s,
                     tf_time_from_year (1950.5).s, 1e-3);
    }
}

/* Bad rows go, with their lines; the others stay; unknown columns are named with what they might be. */
static void
test_bad_rows (void)
{
  g_autoptr (TfBrought) b = bring ("time,lat_deg,axis_tilt_deg,Lat,tilt,cycle,XYZ\n"
                                   "1950-01-01T00:00:00Z,10,5,,,,\n"
                                   "1950-01-0,10,5,,,,\n"
                                   "1950-01-02,95,5,,,,\n"
                                   "1950-01-03,,5,,,,\n"
                                   "1950-01-04,10,much,,,,\n"
                                   "1950-01-05,10,,,,,\n"
                                   "1950-01-06,10\n",
                                   NULL, FALSE);
  static const guint lines[] = { 8, 3, 4, 5, 6 };
  g_assert_cmpuint (b->entries->len, ==, 2);
  g_assert_cmpuint (b->faults->len, ==, G_N_ELEMENTS (lines));
  for (guint k = 0; k < G_N_ELEMENTS (lines); k++)
    g_assert_cmpuint (g_array_index (b->faults, TfFault, k).place, ==, lines[k]);
  g_assert_cmpuint (b->table->n_rows, ==, 7);
  g_assert_cmpuint (b->table->n_left, ==, 5);
  g_autofree char *rest = g_strjoinv ("\n", (char *[]){ b->not_taken->pdata[0], b->not_taken->pdata[1],
                                                        b->not_taken->pdata[2], b->not_taken->pdata[3], NULL });
  g_assert_cmpuint (b->not_taken->len, ==, 4);
  g_assert_nonnull (strstr (rest, "lat_deg"));
  g_assert_nonnull (strstr (rest, "cycle: judged"));
  g_assert_nonnull (strstr (rest, "XYZ: not known"));
  g_assert_cmpstr (b->table->linking, ==, "alone"); /* no longitude */
}

/* Three days of one region turning with the Sun, another 20 degrees off, a gap of five days. */
static const char days[] = "time,lat_deg,cmd_deg,region\n"
                           "1950-01-01T12:00:00Z,10,-30,A\n"
                           "1950-01-01T12:00:00Z,12,-10,B\n"
                           "1950-01-02T12:00:00Z,10.5,-16.8,A\n"
                           "1950-01-03T12:00:00Z,10,-3.6,B\n"
                           "1950-01-08T12:00:00Z,10,62,C\n";

static void
assert_groups (const TfBrought *b, const guint expected[5], const char *linking, guint regions)
{
  for (guint k = 0; k < 5; k++)
    g_assert_cmpuint (g_array_index (b->entries, TfOutsideEntry, k).group, ==, expected[k]);
  g_assert_cmpstr (b->table->linking, ==, linking);
  g_assert_cmpuint (b->n_regions, ==, regions);
}

static void
test_linking (void)
{
  g_autoptr (TfBrought) named = bring (days, NULL, FALSE);
  g_autoptr (TfBrought) alone = bring (days, NULL, TRUE);
  g_autoptr (TfBrought) linked
      = bring (days, "time = time\nlat_deg = lat_deg\ncmd_deg = cmd_deg\nregion = none\n", FALSE);
  assert_groups (named, (const guint[]){ 0, 1, 0, 1, 4 }, "column", 3);
  assert_groups (linked, (const guint[]){ 0, 1, 0, 0, 4 }, "place", 3);
  assert_groups (alone, (const guint[]){ 0, 1, 2, 3, 4 }, "alone", 5);
  g_assert_cmpstr (linked->not_taken->pdata[0], ==, "region: the map does not take it");
  g_assert_cmpstr (g_array_index (named->entries, TfOutsideEntry, 0).passage, ==, "A");
  g_assert_cmpstr (g_array_index (linked->entries, TfOutsideEntry, 0).passage, !=,
                   g_array_index (linked->entries, TfOutsideEntry, 2).passage);
}

static const struct
{
  const char *map, *words;
} not_maps[] = {
  { "lat_deg LAT", "line 1" },
  { "\n\nlat = LAT", "line 3" },
  { "hale = H", "judged" },
  { "lat_deg = A\nlat_deg = B", "line 2" },
  { "lat_deg =", "missing" },
  { "lat_deg = A ; positive east", "positive" },
  { "axis_tilt_deg = A ; range 180", "polarity_tilt_deg" },
  { "lat_deg = A ; colour red", "unit U" },
};

static void
test_not_maps (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (not_maps); k++)
    {
      g_autoptr (GError) error = NULL;
      g_autoptr (TfColumnMap) map = tf_column_map_read (not_maps[k].map, "made.map", &error);
      g_assert_null (map);
      g_assert_error (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_READ);
      g_assert_nonnull (strstr (error->message, not_maps[k].words));
    }
  g_autoptr (TfColumnMap) one = tf_column_map_read (
      "cmd_deg = L;positive east; unit rad ;missing -9\nregion=none\n", "m", NULL);
  g_autofree char *text = tf_column_map_dup_text (one);
  g_autoptr (TfColumnMap) two = tf_column_map_read (text, "m", NULL);
  g_autofree char *again = tf_column_map_dup_text (two);
  g_assert_cmpstr (text, ==, "cmd_deg = L ; unit rad ; positive east ; missing -9\nregion = none\n");
  g_assert_cmpstr (again, ==, text);
}

void
add_bring_tests (void)
{
  g_test_add_func ("/exchange/table/csv-has-quotes-remarks-and-faulty-lines", test_csv);
  g_test_add_func ("/exchange/table/what-is-no-table-is-told-in-one-line", test_not_tables);
  g_test_add_func ("/exchange/table/votable-rows-in-binary", test_binary);
  g_test_add_func ("/exchange/unit/factors-between-spellings", test_units);
  g_test_add_func ("/exchange/bring/conventions-of-a-map", test_conventions);
  g_test_add_func ("/exchange/bring/bad-rows-are-left-out-with-their-lines", test_bad_rows);
  g_test_add_func ("/exchange/bring/rows-are-linked-by-name-by-place-or-not", test_linking);
  g_test_add_func ("/exchange/bring/a-map-s-faults-are-told-with-their-line", test_not_maps);
}
