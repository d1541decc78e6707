/** The caution that stands on every screen, table and print, in one sentence a clause. */
export const CAUTION =
  'Research and exploration aid, not a medical device: never the sole basis of a prescribing decision. ' +
  'Results depend on a model that may not fit this patient. ' +
  'Licensed clinicians decide, under local protocols and product labelling. ' +
  'Confirm units, doses and levels independently.'
