"""The few calls that differ between systems: locks, syncing to the disk, free space.

One module, so that what is best effort on Windows can be seen in one place: there a folder cannot be synced,
and the lock is a byte far behind the end of the file, because locks there also keep readers out.
"""

from __future__ import annotations

import os
import shutil
import stat
import sys
from pathlib import Path
from typing import Final

if sys.platform == "win32":
    import msvcrt
else:
    import fcntl

# No child may inherit the descriptor: it would keep the lock after our death. Windows would translate line ends.
_COMMON: Final = getattr(os, "O_CLOEXEC", 0) | getattr(os, "O_BINARY", 0)
APPEND_NEW: Final = os.O_RDWR | os.O_APPEND | os.O_CREAT | os.O_EXCL | _COMMON
APPEND_OLD: Final = os.O_RDWR | os.O_APPEND | _COMMON
REWRITE: Final = os.O_RDWR | os.O_CREAT | _COMMON
_READ: Final = os.O_RDONLY | getattr(os, "O_NONBLOCK", 0) | _COMMON

_LOCKED_BYTE: Final = 0x7FFF_FFFE


def lock(descriptor: int) -> bool:
    """Take the exclusive lock of an open file without waiting; False where somebody else has it.

    It belongs to the open file, ends with its last descriptor, hence also with the death of this process.
    Not dependable on network folders. Raises OSError where the file system has no locks.
    """
    try:
        if sys.platform == "win32":
            os.lseek(descriptor, _LOCKED_BYTE, os.SEEK_SET)
            msvcrt.locking(descriptor, msvcrt.LK_NBLCK, 1)
        else:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except (BlockingIOError, PermissionError):
        return False
    return True


def sync(descriptor: int) -> None:
    """Return when the file's bytes are on the disk, as far as the disk is honest; OSError otherwise."""
    if sys.platform == "darwin":
        # There fsync stops at the drive's own cache.
        fcntl.fcntl(descriptor, fcntl.F_FULLFSYNC)
    else:
        os.fsync(descriptor)


def sync_folder(folder: Path) -> None:
    """Return when the folder's list of names is on the disk; nothing can be done on Windows."""
    if sys.platform == "win32":
        return
    descriptor = os.open(folder, os.O_RDONLY | os.O_DIRECTORY | os.O_CLOEXEC)
    try:
        os.fsync(descriptor)
    finally:
        os.close(descriptor)


def make_folder(folder: Path) -> None:
    """Make a folder and those above it, each on the disk before the next; it may exist already."""
    missing = []
    while not folder.is_dir():
        missing.append(folder)
        if folder == folder.parent:
            break
        folder = folder.parent
    for each in reversed(missing):
        each.mkdir(exist_ok=True)
        sync_folder(each.parent)


def write_at_start(descriptor: int, data: bytes) -> int:
    """Write at the start of the file in one call; the number of bytes written."""
    if sys.platform == "win32":
        os.lseek(descriptor, 0, os.SEEK_SET)
        return os.write(descriptor, data)
    return os.pwrite(descriptor, data, 0)


def read_all(descriptor: int) -> bytes:
    """Every byte of an open file from its start."""
    os.lseek(descriptor, 0, os.SEEK_SET)
    pieces = []
    while piece := os.read(descriptor, 1 << 20):
        pieces.append(piece)
    return b"".join(pieces)


def read_file(path: Path, most: int) -> bytes:
    """Every byte of a regular file of at most `most` [byte]; OSError for a pipe, a folder or a larger one.

    A pipe that lies among the files must not be waited on, hence opened without blocking and looked at first.
    """
    descriptor = os.open(path, _READ)
    try:
        found = os.fstat(descriptor)
        if not stat.S_ISREG(found.st_mode):
            raise OSError(f"{path} is not a regular file")
        if found.st_size > most:
            raise OSError(f"{path} is larger than {most // 1_000_000} MB")
        return read_all(descriptor)
    finally:
        os.close(descriptor)


def still_there(descriptor: int, path: Path, size: int) -> bool:
    """Whether `path` still names this open file, and it is `size` [byte] long."""
    ours = os.fstat(descriptor)
    try:
        named = path.stat()
    except OSError:
        return False
    return (ours.st_dev, ours.st_ino, ours.st_size) == (named.st_dev, named.st_ino, size)


def free_bytes(folder: Path) -> int:
    """[byte] that may still be written to the disk of this folder."""
    return shutil.disk_usage(folder).free
