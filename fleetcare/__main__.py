"""Where the program starts, and where whatever went wrong becomes one line and an exit status."""

import gc
import sys
from collections.abc import Sequence
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from fleetcare.context import Context

INTERRUPTED = 130


def main(arguments: Sequence[str] | None = None) -> int:
    """Run a command line (the process's own by default) and give its exit status; never a traceback."""
    # Next to nothing made while starting is garbage; looking for it as often as usual takes a tenth of a due list.
    gc.set_threshold(50_000, 20, 20)
    try:
        return _run(sys.argv[1:] if arguments is None else arguments)
    except KeyboardInterrupt:  # while loading, too
        return INTERRUPTED


def _run(arguments: Sequence[str]) -> int:
    from fleetcare.cli import main as command_line
    from fleetcare.cli import output

    try:
        status = command_line.run(arguments, open_screens)
        output.finish()
    except BrokenPipeError:
        output.abandon()
        return 0  # the reader has seen enough; what the command had to do is done
    except OSError as error:
        output.abandon()
        output.complain(f"{error}; check the path, its permissions and the space left")
        return 1
    except Exception as error:
        output.complain(f"a fault in fleetcare itself ({type(error).__name__}: {error}); please report this line")
        return 1
    return status


def open_screens(context: "Context") -> int:
    """Show the screens until they are left. Loaded only here: no command pays for what it does not show."""
    from fleetcare.tui.app import run_screens

    return run_screens(context)


if __name__ == "__main__":
    sys.exit(main())
