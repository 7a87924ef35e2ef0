"""Files written whole or not at all."""

import os
import secrets
from pathlib import Path


def write_whole(contents):
    """Write bytes to paths, ``contents`` being {path: bytes}: all of them or none.

    Each goes to a temporary neighbour first and all are moved into place last, so that readers see old files or new
    ones. Links are followed, permissions kept. Raises OSError, or ValueError for what is no ordinary file.
    """
    drafts = {}
    try:
        for path, content in contents.items():
            target = Path(os.path.realpath(path))
            if target.exists() and not target.is_file():
                raise ValueError("not an ordinary file")
            draft = target.with_name(f".{target.name[:40]}-{secrets.token_hex(4)}")
            drafts[draft] = target
            with draft.open("xb") as file:
                file.write(content)
                file.flush()
                os.fsync(file.fileno())
            if target.exists():
                draft.chmod(target.stat().st_mode & 0o777)
        for draft, target in drafts.items():
            draft.replace(target)
    finally:
        for draft in drafts:
            draft.unlink(missing_ok=True)
