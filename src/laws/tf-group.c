/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-group.h"

TfGroup
tf_group_of (int cycle, int hemisphere)
{
  return (TfGroup){ .cycle = cycle, .hemisphere = hemisphere, .size = -1 };
}

gboolean
tf_group_holds (const TfGroup *group, const TfSampleRow *row, const TfVerdict *verdict,
                gboolean sure)
{
  const TfCycleCall *call = &verdict->cycle;
  if (group->cycle != 0 && (call->number != group->cycle || (sure && !call->sure)))
    return FALSE;
  if (group->parity != TF_PARITY_ANY
      && (call->number == 0 || (sure && !call->sure)
          || (call->number % 2 == 0) != (group->parity == TF_PARITY_EVEN)))
    return FALSE;
  if (group->flux_to_mx > 0.0
      && !(row->flux_mx >= group->flux_from_mx && row->flux_mx < group->flux_to_mx))
    return FALSE;
  if (group->size >= 0 && row->size != group->size)
    return FALSE;
  return group->hemisphere == 0
         || (group->hemisphere > 0 ? row->lat_deg > 0.0 : row->lat_deg < 0.0);
}
