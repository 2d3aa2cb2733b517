/**
 * Every error that a person or a script can meet. HTTP status and log level follow from `kind`;
 * `docs/errors.md` has one entry per code and a test compares the two.
 */
export type ErrorKind =
  | 'invalid'
  | 'unauthenticated'
  | 'forbidden'
  | 'not-found'
  | 'conflict'
  | 'not-allowed-now'
  | 'too-many'
  | 'unavailable'
  | 'timeout'
  | 'device-fault'
  | 'bug';

interface CatalogueEntry {
  kind: ErrorKind;
  /** The default text: what is wrong and what to do. */
  message: string;
}

const entry = (kind: ErrorKind, message: string): CatalogueEntry => ({ kind, message });

export const errorCatalogue = {
  'request.invalid': entry('invalid', 'The request has faults: mend the fields named in "details".'),
  'request.media-type': entry('invalid', 'Send the body as JSON, with "Content-Type: application/json".'),
  'request.too-large': entry('invalid', 'The request is larger than the server takes: send less at a time.'),
  'request.cross-origin': entry(
    'forbidden',
    'The request comes from a page of another address: open the console at the address of this server.',
  ),
  'request.not-found': entry('not-found', 'Nothing is at this address.'),
  'request.precondition': entry(
    'conflict',
    'The document has changed since you read it: load it again and repeat your change.',
  ),
  'request.too-many': entry(
    'too-many',
    'Too many requests: wait for the time that the Retry-After header gives.',
  ),
  'auth.required': entry('unauthenticated', 'Sign in first.'),
  'auth.failed': entry('unauthenticated', 'Account or password is wrong.'),
  'auth.forbidden': entry('forbidden', 'Your role may not do this.'),
  'auth.foreign-rig': entry('forbidden', 'Your role reaches other rigs, not this one.'),
  'auth.code-needed': entry(
    'unauthenticated',
    'Give the code of your authenticator as well, or one of your recovery codes.',
  ),
  'auth.code-wrong': entry(
    'unauthenticated',
    'The code is wrong, too old or was used already: wait for the next one.',
  ),
  'auth.reauthentication-needed': entry(
    'forbidden',
    'Give your password again first: this act needs it within the last five minutes.',
  ),
  'auth.second-factor-needed': entry(
    'forbidden',
    'This act needs a second factor at this station: set up an authenticator on the page of your account.',
  ),
  'auth.second-factor-exists': entry('conflict', 'The account has a second factor already: remove it first.'),
  'auth.second-factor-missing': entry('not-allowed-now', 'The account has no second factor.'),
  'auth.session-not-found': entry('not-found', 'The account has no such session: it has ended already.'),
  'auth.setup-code': entry(
    'forbidden',
    'The set-up code is wrong: use the one that the server printed at its start.',
  ),
  'auth.setup-done': entry('conflict', 'The first administrator exists already: sign in.'),
  'user.not-found': entry('not-found', 'No such account.'),
  'user.exists': entry('conflict', 'An account with this name exists already: choose another.'),
  'user.last-administrator': entry(
    'conflict',
    'This is the last enabled administrator: give the role to somebody else first.',
  ),
  'user.weak-password': entry(
    'invalid',
    'Choose a longer password that is neither common nor built from names that belong to the account.',
  ),
  'rig.not-found': entry('not-found', 'No such rig.'),
  'rig.exists': entry('conflict', 'A rig with this id exists already: choose another.'),
  'rig.busy': entry('conflict', 'The rig is busy: wait for its run to end, or stop it.'),
  'rig.offline': entry(
    'unavailable',
    'The rig is offline: check power, cable and address of its connection.',
  ),
  'rig.not-armed': entry('not-allowed-now', 'The rig is not armed: arm it first.'),
  'rig.cannot-arm': entry('not-allowed-now', 'The rig cannot be armed: clear the points named in "details".'),
  'rig.tripped': entry(
    'not-allowed-now',
    'The rig is tripped: have the cause cleared and the trip reset first.',
  ),
  'rig.not-tripped': entry('not-allowed-now', 'The rig is not tripped: there is nothing to reset.'),
  'rig.cause-present': entry('not-allowed-now', 'The cause of the trip is still there: clear it first.'),
  'rig.locked-out': entry(
    'not-allowed-now',
    'The rig is locked out: the person named on the lockout must lift it.',
  ),
  'rig.illegal-move': entry('not-allowed-now', 'The rig cannot do this in its present state.'),
  'rig.not-a-bench': entry(
    'not-allowed-now',
    'Faults can be put on the connections of a bench only; this rig is not marked as one.',
  ),
  'connection.not-found': entry('not-found', 'The rig has no such connection.'),
  'envelope.not-found': entry('not-found', 'No such envelope.'),
  'envelope.none-in-force': entry(
    'not-allowed-now',
    'No approved envelope is in force for this rig: have one approved first.',
  ),
  'envelope.own-draft': entry(
    'forbidden',
    'The author of an envelope cannot approve it: somebody else with the role must.',
  ),
  'envelope.wrong-status': entry('not-allowed-now', 'The envelope is not at the stage that this needs.'),
  'calibration.not-found': entry('not-found', 'No such calibration.'),
  'calibration.not-in-force': entry('not-allowed-now', 'The calibration is not in force.'),
  'calibration.no-certificate': entry('not-found', 'No certificate was uploaded for this calibration.'),
  'calibration.has-certificate': entry(
    'conflict',
    'The calibration has its certificate already: it is part of the record and stays.',
  ),
  'interlock.not-found': entry('not-found', 'The envelope in force has no such interlock.'),
  'interlock.no-bypass': entry('not-allowed-now', 'The envelope does not allow to bypass this interlock.'),
  'interlock.not-bypassed': entry('not-allowed-now', 'The interlock is not bypassed.'),
  'interlock.not-latched': entry(
    'not-allowed-now',
    'The interlock does not wait to be acknowledged: its condition still holds, or it has not acted.',
  ),
  'proof-test.not-found': entry('not-found', 'There is no such proof test on this rig.'),
  'proof-test.not-open': entry('conflict', 'The proof test is signed or was abandoned: begin another one.'),
  'proof-test.no-response': entry(
    'not-allowed-now',
    'The interlock has not acted in this proof test: it cannot be signed as passed.',
  ),
  'proof-test.overdue': entry('not-allowed-now', 'Proof tests of this rig are overdue: do them first.'),
  'channel.not-found': entry('invalid', 'The rig has no such channel.'),
  'channel.no-limit': entry(
    'not-allowed-now',
    'This actuator has no approved limit, so it cannot be written.',
  ),
  'move.hold-ended': entry(
    'not-allowed-now',
    'This press of hold-to-move is over: let go, and press again to move on.',
  ),
  'move.held-by-another': entry('conflict', 'Somebody else holds this actuator: wait until it is released.'),
  'lockout.not-found': entry('not-found', 'The rig has no such lockout: it may have been lifted already.'),
  'lockout.not-yours': entry(
    'forbidden',
    'A lockout is lifted by the person who set it, or by those named on it.',
  ),
  'lockout.exists': entry('conflict', 'You hold this rig already: lift your lockout before you set another.'),
  'trip.not-found': entry('not-found', 'No such trip of this rig.'),
  'objective.not-found': entry('not-found', 'No such objective.'),
  'expression.invalid': entry('invalid', 'The expression cannot be understood.'),
  'analysis.invalid-input': entry(
    'invalid',
    'A setting or value of the analysis does not fit: mend the fields named in "details".',
  ),
  'analysis.too-little-data': entry(
    'invalid',
    'The analysis needs more data: measure longer or more points.',
  ),
  'analysis.no-fit': entry(
    'invalid',
    'The data do not determine what was asked for: make the excitation larger, or spread the points further.',
  ),
  'experiment.not-found': entry('not-found', 'No such experiment or version.'),
  'experiment.preflight-failed': entry(
    'invalid',
    'Preflight found errors: mend the steps named in "details".',
  ),
  'run.not-found': entry('not-found', 'No such run.'),
  'run.ended': entry('not-allowed-now', 'The run has ended.'),
  'run.not-running': entry('not-allowed-now', 'The run is not in a state in which this can be done.'),
  'run.no-samples': entry(
    'not-found',
    'The run has no samples: its file is missing or it ended before its first scan.',
  ),
  'recorder.failed': entry(
    'unavailable',
    'The samples cannot be recorded: free disk space, and check the data folder and its rights.',
  ),
  'adapter.unknown': entry('invalid', 'No adapter with this id is installed.'),
  'adapter.timeout': entry(
    'timeout',
    'The device did not answer in time: check unit number, cable and timeout.',
  ),
  'adapter.refused': entry(
    'device-fault',
    'The device refused the request: check the address and type of the channel.',
  ),
  'adapter.corrupt': entry('device-fault', 'The device sent something that is no valid answer.'),
  'adapter.disconnected': entry(
    'unavailable',
    'The connection is lost or cannot be made: check host, port, power and cable.',
  ),
  'adapter.misconfigured': entry('invalid', 'The connection or channel is configured wrongly.'),
  'adapter.cancelled': entry('not-allowed-now', 'The request was cancelled.'),
  'plug-in.not-found': entry(
    'not-found',
    'No package or folder of this name is there: check CRESTHOLD_PLUGINS and install the package.',
  ),
  'plug-in.not-loaded': entry(
    'invalid',
    'The plug-in failed while it was loaded: have its author mend what the message names.',
  ),
  'plug-in.malformed': entry(
    'invalid',
    'The plug-in does not have what an adapter must have: mend the parts named in "details".',
  ),
  'plug-in.other-contract': entry(
    'invalid',
    'The plug-in was written for another version of the adapter contract: install one that fits.',
  ),
  'plug-in.duplicate': entry('conflict', 'Another adapter has this id already: remove one of the two.'),
  'host.unavailable': entry('unavailable', 'The rig host is starting or has ended: try again in a moment.'),
  'host.timeout': entry('timeout', 'The rig host did not answer in time.'),
  'server.unhealthy': entry('unavailable', 'A part of the server does not work: see "details" for which.'),
  'server.bug': entry('bug', 'The server met a fault of its own; it is in the log.'),
} as const satisfies Record<string, CatalogueEntry>;

export type ErrorCode = keyof typeof errorCatalogue;

export const errorCodes = Object.keys(errorCatalogue) as ErrorCode[];
