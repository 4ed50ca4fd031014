/**
 * Every expected refusal: its stable code, its status and a sentence a person can act on.
 * Said once; a service throws `new Refusal(code)`, and may replace the sentence by a more exact one.
 */
export const refusals = {
  // who
  sign_in_needed: [401, 'Sign in to go on.'],
  sign_in_refused: [401, 'That e-mail and password do not go together.'],
  too_many_tries: [429, 'Too many wrong tries. Wait fifteen minutes, or set a new password.'],
  not_allowed: [403, 'Your role may not do this.'],
  foreign_origin: [403, 'This request came from another site and was refused.'],
  link_not_usable: [410, 'This link was used already or has run out. Ask for a new one.'],
  // request
  not_found: [404, 'There is nothing here that you may see.'],
  method_not_allowed: [405, 'This address does not take that kind of request.'],
  json_needed: [415, 'Send this as application/json.'],
  body_too_large: [413, 'This is larger than the address takes.'],
  body_not_json: [400, 'The body is not readable as JSON.'],
  input_invalid: [422, 'Some of what was sent cannot be used; each is named.'],
  id_invalid: [404, 'There is nothing here that you may see.'],
  idempotency_key_invalid: [422, 'The Idempotency-Key is not a UUID.'],
  idempotency_conflict: [409, 'This key was used before with something else in it. Use a new key.'],
  // uploads
  upload_not_found: [404, 'This upload is not yours or does not exist.'],
  upload_too_large: [422, 'The file is larger than this kind may be.'],
  upload_too_many: [429, 'Too many uploads are open. Finish or wait for some, then go on.'],
  upload_incomplete: [422, 'Storage does not have the whole file yet. Send the missing part and say complete again.'],
  upload_differs: [422, 'What arrived is not what was announced. Send the file again.'],
  upload_wrong_type: [422, 'The file is not of the kind its name says.'],
  upload_wrong_purpose: [422, 'This upload was made for something else.'],
  upload_used: [409, 'This upload is used already.'],
  upload_not_received: [409, 'This upload is not complete yet.'],
  picture_unreadable: [422, 'The picture cannot be read. Take it again.'],
  picture_too_large: [422, 'The picture has more than 60 megapixels. Take it with the ordinary camera.'],
  // evidence
  head_not_found: [404, 'There is no such head that you may see.'],
  stage_not_found: [404, 'This route has no such stage.'],
  stage_not_open: [409, 'This stage is not open yet.'],
  clearance_missing: [409, 'A clearance this stage needs is missing or has lapsed.'],
  head_stopped: [409, 'A stop stands on this head. Speak with your instructor.'],
  nothing_due: [409, 'Nothing of this stage is due any more.'],
  submission_not_found: [404, 'There is no such submission that you may see.'],
  submission_decided: [409, 'This submission is decided. What you add now belongs to the next try.'],
  submission_not_draft: [409, 'This submission was asked already.'],
  submission_not_scored: [409, 'This submission is not scored yet. Wait a moment and look again.'],
  port_not_on_head: [422, 'This head has no such port.'],
  photo_seen_before: [409, 'This picture was used before. Take a new one.'],
  view_unknown: [422, 'There is no such view.'],
  card_not_found: [422, 'There is no scale card with that number.'],
  reading_not_plausible: [422, 'That figure cannot be right in that unit.'],
  reading_void_unknown: [422, 'The reading to take the place of is not in this submission.'],
  instrument_unknown: [422, 'Pick the instrument from the list.'],
  instrument_unfit: [422, 'That instrument does not read this quantity.'],
  quantity_unknown: [422, 'The rubric does not know this quantity.'],
  sheet_unreadable: [422, 'The sheet cannot be read.'],
  sheet_too_large: [422, 'The spreadsheet unpacks to more than a flow sheet can be.'],
  // review
  review_stale: [409, 'The submission changed since you opened it. Look at what is new first.'],
  release_forbidden: [409, 'The release rule does not allow this.'],
  point_not_yours: [403, 'You may not sign this point in this cohort.'],
  own_work: [403, 'Nobody reviews their own work.'],
  point_not_due: [422, 'This submission does not fall on that point.'],
  override_outside: [422, 'That criterion is not part of what this point needs.'],
  override_not_allowed: [422, 'An override moves a state one step and cannot lift a stop.'],
  pin_outside: [422, 'A pin must be on a photo of this submission, inside the picture, and tied to one of its criteria.'],
  // rubric, compute
  must_unreachable: [422, 'A must of this rubric has no value that could be accepted.'],
  rubric_invalid: [422, 'The rubric has a mistake; it is named.'],
  compute_refused: [422, 'That cannot be computed.'],
  compute_unknown: [404, 'There is no such quantity.'],
  // people
  email_taken: [409, 'There is an account with that e-mail already.'],
  job_not_found: [404, 'There is no such job.'],
} as const satisfies Record<string, readonly [number, string]>

export type RefusalCode = keyof typeof refusals
