import { DEFAULT_HISTORY, DEFAULT_PATIENCE_SECONDS, DEFAULT_WAIT_SECONDS } from "./arguments.ts";

export const HELP = `Posts a build's Jacobians to Clinograph and prints the verdict.

  report FILE --project SLUG [options]      FILE is a build document; - reads standard input
  report --close --project SLUG [options]   completes the build of this commit, lane and run without its missing shards

What the document leaves out (format, commit, history, lane, run, shard) is filled in from git and from the usual
variables of CI systems; what it says stands. Options stand above both.

  --server URL       where Clinograph is (or CLINOGRAPH_URL)
  --project SLUG     the project (or CLINOGRAPH_PROJECT)
  --lane NAME        the lane
  --shard I/N        this document is shard I of N, counted from 1
  --run-id ID        what the shards of one build have in common; needed for shards outside a known CI system
  --history N        earlier commits to tell, from git (default ${DEFAULT_HISTORY})
  --close            after posting, complete the build without the shards that are missing
  --wait [SECONDS]   wait for the other shards and the gate's decision (default ${DEFAULT_WAIT_SECONDS})
  --patience SECONDS how long to try again when the server cannot be reached or is busy (default ${DEFAULT_PATIENCE_SECONDS})
  --dry-run          judge, and keep nothing
  --json             print the server's answer as JSON instead of words
  --help, --version

The token comes from the environment alone, CLINOGRAPH_TOKEN: what stands on a command line can be read by others.
It needs the scope post, and read for --wait and for --close without FILE.

Ends with 0 where the gate passes (warnings included), 1 where it fails, 2 for wrong use or a document that was
refused, 3 where the build could not be posted or its verdict could not be had.
`;
