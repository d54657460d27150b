/** The caution that stands wherever a release is shown or handed out. */
export const releaseCaution =
  'This is training data, not a validated model. A model trained on it needs its own verification and validation before anyone relies on it for a safety-related decision. Whether it may be used or passed on under export-control, licence and confidentiality rules is for your organisation and its advisers to decide.';
