/** English words of every problem that the service answers with; pages and answers say the same. */
export const problemWords = {
  malformed: {
    title: 'Not readable',
    meaning: 'The body is not valid JSON, or a header that the request needs is missing or wrong.',
    remedy: 'Send valid JSON, and the header that the detail names.',
  },
  'not-signed-in': {
    title: 'Not signed in',
    meaning: 'No session came with the request, or it has ended.',
    remedy: 'Sign in and send the request again.',
  },
  'not-allowed': {
    title: 'Not allowed',
    meaning: 'Your role in this company does not include this.',
    remedy: 'Ask an owner or a dispatcher of the company.',
  },
  'foreign-origin': {
    title: 'Sent from elsewhere',
    meaning: 'The request was sent by a page of another site.',
    remedy: 'Use the page of this site.',
  },
  'bad-signature': {
    title: 'Signature wrong',
    meaning: "The provider's signature does not belong to this request.",
    remedy: "Check that account token and public address are the provider's.",
  },
  'not-found': {
    title: 'Not found',
    meaning: 'There is no such thing, or it belongs to another company.',
    remedy: 'Go back and choose it again.',
  },
  'method-not-allowed': {
    title: 'Method not allowed',
    meaning: 'This address does not answer to this method.',
    remedy: 'Use one of the methods in the Allow header.',
  },
  'stale-version': {
    title: 'Changed since',
    meaning: 'Someone else has changed it since you loaded it. Nothing of your change was kept.',
    remedy: 'Look at what is different now and decide again.',
  },
  conflict: {
    title: 'Does not go together',
    meaning: 'What is there now does not allow this.',
    remedy: 'The detail says what stands against it.',
  },
  'key-reused': {
    title: 'Key used before',
    meaning: 'The same Idempotency-Key came with another request.',
    remedy: 'Use a new key for a new request.',
  },
  'too-large': {
    title: 'Too large',
    meaning: 'The body is larger than this endpoint takes.',
    remedy: 'Send less at once.',
  },
  'wrong-type': {
    title: 'Wrong type of content',
    meaning: 'The body is of a type that this endpoint does not read.',
    remedy: 'Send application/json, or the type that the detail names.',
  },
  invalid: {
    title: 'Some of it is not right',
    meaning: 'Fields are missing or have values that cannot be.',
    remedy: 'Each field in `errors` says what was expected.',
  },
  stops: {
    title: 'Cannot stand there',
    meaning: 'At least one check says that it cannot be.',
    remedy: 'Choose another place: `nearest` names some that fit.',
  },
  'reason-needed': {
    title: 'Needs a reason',
    meaning: 'It can stand there, with cautions that someone has to accept.',
    remedy: 'Send a reason for each caution in `findings`.',
  },
  'too-often': {
    title: 'Too often',
    meaning: 'Too many tries in a short time.',
    remedy: 'Wait as long as the Retry-After header says.',
  },
  unexpected: {
    title: 'Something went wrong here',
    meaning: 'A fault on our side. Nothing was kept.',
    remedy: 'Try again. If it stays, name the request id to whoever runs this installation.',
  },
};
