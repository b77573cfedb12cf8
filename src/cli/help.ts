/** What the command line says about itself. */

export const generalHelp: string = `stickband: is the final control assembly making this loop cycle?

  stickband assess FILE    assess one loop from a record of SP, PV and OP
  stickband audit SOURCE   assess all loops of a folder, a list or an export; group and rank them
  stickband merge PART...  put the shards of an audit together
  stickband valve-test FILE  read a hold, step or stroke test of a valve
  stickband notebook       open Jupyter with the guided notebook and its kernel ready

  stickband COMMAND --help says more about one command; stickband --version prints the version.

Exit codes: 0 an answer was made ("cannot tell" is one, and so is an audit with failed loops), 2 wrong use, unreadable input, unwritable output
or Jupyter missing, 1 a fault of stickband itself.`;

export const assessHelp: string = `stickband assess FILE [options]

Reads one loop from FILE (CSV text, or .xlsx), says what makes it cycle and how much dead band and slip jump
its final control assembly shows, and writes the guided notebook and one page to share.

What the file holds. Columns are recognised by name where that is safe; a column called MV never is.
  --tag T              the loop's tag; picks one loop of an export that holds several
  --time COL --sp COL --pv COL --op COL --travel COL --mode COL
                       names of the columns: time, set point, process variable, controller output (%),
                       measured valve travel, controller mode
  --time-format F      how time is written, e.g. "dd.MM.yyyy HH:mm:ss", when it is not ISO 8601 or epoch time
  --zone Z             time zone of stamps without one, e.g. Europe/Paris; without it UTC is taken

What is known of the loop. Everything is optional; what is not stated is assumed and noted.
  --service S          flow, pressure, level, temperature or other
  --response R         self-regulating or integrating: does the PV settle or run away after a lasting move
  --pv-range=LOW:HIGH  range of the PV, in its unit
  --pv-unit U          unit of the PV, e.g. m3/h
  --valve-range=LOW:HIGH  the part of the OP that moves this valve, in % of OP (split range)
  --dead-time S        dead time of the process, s
  --process-gain G     PV units per % of travel

What to make of it.
  --out DIR            folder for notebook and page (default: notebooks/rendered in the repository, else stickband-out)
  --json FILE|-        also write the assessment as JSON; with "-" stdout holds JSON alone, everything else
                       goes to stderr, and no notebook is made unless --out is given
  --no-notebook        neither notebook nor page
  --seed N             seed of the random numbers (default 1); equal seeds give equal results
  --install            set up Jupyter when it is missing: with pip in .venv, or Debian's packages for root
  --help               this text`;

export const auditHelp: string = `stickband audit FOLDER|LIST.csv|EXPORT --map FILE [options]

Assesses many loops: which of them cycle, why, which share one oscillation, and where to look first. A loop that
cannot be read is reported and stops nothing.

Where the loops are.
  FOLDER               one file a loop (.csv, .txt, .tsv, .xlsx)
  LIST.csv             a list of loops with the columns file,tag,service,response,pv_low,pv_high, all but file
                       optional; paths are relative to the list
  EXPORT --map FILE    one export that holds many loops (text or Parquet of any size, .xlsx up to 64 MB; a column
                       a signal, or a row a value), and the map that says which column or tag is what
  EXPORT --draft-map FILE|-
                       writes such a map from the names in the export, for you to check; what the names do not
                       decide is left open, with the reason in its column "comment"

What holds for every file of a folder or list, as for "stickband assess".
  --time COL --sp COL --pv COL --op COL --travel COL --mode COL
  --time-format F --zone Z

How it runs.
  --out DIR            folder for journal, audit (JSON and CSV), notebook and page (default: audit-NAME in
                       notebooks/rendered in the repository, else in stickband-out; the journal there goes when
                       the audit is complete)
  --json FILE|-        also write the audit as JSON; with "-" stdout holds JSON alone, the rest goes to stderr, and
                       no notebook is made unless --out is given
  --no-notebook        neither notebook nor page; a shard has none either
  --pages N            also render the guided notebook of the first N loops of the ranking, into the folder "loops"
                       beside the page, which links to them (default 0: the page tells each loop in short;
                       about ten seconds a loop)
  --install            set up Jupyter when it is missing: with pip in .venv, or Debian's packages for root
  --resume             continue an audit that was stopped; failed loops and changed files are done again
  --workers N          loops at a time (default: one for each core; 0: without threads)
  --shard I/N          only the loops of shard I of N, by a hash of their tags; "stickband merge" joins the shards
  --seed N             seed of the random numbers (default 1); equal seeds give equal results
  --help               this text`;

export const mergeHelp: string = `stickband merge PART... --json FILE|- [--out DIR]

Joins all shards of one audit (audit-part-I-of-N.json) into the audit that one run would have given, byte for
byte. Groups and ranking are made anew from all loops.

  --json FILE|-        where the audit goes; with "-" stdout holds JSON alone and the rest goes to stderr
  --out DIR            folder for the audit (JSON and CSV), its notebook and page; --json may then be left out
  --no-notebook        neither notebook nor page
  --install            set up Jupyter when it is missing: with pip in .venv, or Debian's packages for root
  --help               this text`;

export const notebookHelp: string = `stickband notebook [--install]

Opens Jupyter with the TypeScript kernel ready: in the repository on its notebooks, elsewhere on the current
folder, into which the guided notebook is copied unless a file of that name is there.

  --install            set up Jupyter when it is missing: with pip in .venv, or Debian's packages for root
  --help               this text`;

export const valveTestHelp: string = `stickband valve-test FILE [options]

Reads a test of a valve from FILE (CSV text, or .xlsx): a manual hold, steps, or strokes (ramps). Says whether the
cycle died, or dead band, resolution, hysteresis, response times, and, where actuator pressure was logged, spring and friction.

What the file holds. Columns are recognised by name where that is safe; a column called MV never is.
  --tag T              the loop's tag; picks one loop of a file that holds several
  --time COL --op COL --travel COL --pv COL --pressure COL --mode COL
                       names of the columns: time, command (%), measured valve travel, process variable,
                       pressure in the actuator, controller mode
  --time-format F      how time is written, when it is not ISO 8601 or epoch time
  --zone Z             time zone of stamps without one; without it UTC is taken

What is known of the test and the valve. Everything is optional; what is not stated is assumed and noted.
  --kind K             hold, step or stroke; without it, by what the command did
  --response R         self-regulating or integrating, for tests that are read from PV
  --period S           for a hold without cycles before it: period of the cycle, s,
  --swing X            and peak-to-peak swing of PV, as the assessment found them
  --lag S              for strokes without pressure: lag of the actuator, s, e.g. the T63 of a step test
  --pressure-unit U    unit of the pressure, e.g. kPa
  --stroke "40 mm"     rated travel, and
  --area "645 cm2"     effective area of the actuator: friction is then given as a force too

  --json FILE|-        also write the reading as JSON; with "-" stdout holds JSON alone, everything else goes to stderr
  --help               this text`;
