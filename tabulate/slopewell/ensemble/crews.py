"""Who does the work: this process, processes of this machine, or a Dask cluster."""

from __future__ import annotations

import contextlib
import re
import signal
import threading
from collections.abc import Generator, Iterable, Iterator
from itertools import islice
from typing import TYPE_CHECKING, Any

from ..problems import Problem, UnusableInput
from .job import Job, Outcome, failed, run_set
from .sets import ParameterSet

if TYPE_CHECKING:
    from concurrent.futures import Future, ProcessPoolExecutor

AHEAD = 4
"""Sets that wait at a worker: enough to keep it busy, and no more of them in memory."""

PATIENCE = "10s"
"""How long a scheduler may take to answer."""


def here(job: Job, sets: Iterable[ParameterSet]) -> Generator[Outcome, None, None]:
    """Run sets one after another in this process."""
    for chosen in sets:
        yield run_set(job, chosen)


def on_processes(job: Job, sets: Iterable[ParameterSet], workers: int) -> Generator[Outcome, None, None]:
    """Run sets on so many processes of this machine, yielding outcomes as they come.

    A set whose process dies is tried once more, alone, and is then given up.
    """
    left = iter(sets)
    while True:
        suspects = yield from _until_broken(job, left, workers)
        if not suspects:
            return
        for chosen in suspects:
            if (yield from _until_broken(job, iter((chosen,)), 1)):
                yield failed(job, chosen, "its process ended, perhaps for want of memory")


def _until_broken(job: Job, left: Iterator[ParameterSet], workers: int) -> Any:
    """Yield outcomes until all are done, or until a process dies; return the sets that were lost then."""
    from concurrent.futures import FIRST_COMPLETED, wait
    from concurrent.futures.process import BrokenProcessPool

    waiting: dict[Future[Outcome], ParameterSet] = {}
    lost: list[ParameterSet] = []
    with _pool(workers) as pool:
        while True:
            for chosen in islice(left, 0 if lost else workers * AHEAD - len(waiting)):
                try:
                    with _deaf():
                        waiting[pool.submit(run_set, job, chosen)] = chosen
                except BrokenProcessPool:
                    lost.append(chosen)
                    break
            if not waiting:
                return lost
            for future in wait(waiting, return_when=FIRST_COMPLETED).done:
                chosen = waiting.pop(future)
                if isinstance(future.exception(), BrokenProcessPool):
                    lost.append(chosen)
                else:
                    yield future.result()


@contextlib.contextmanager
def _pool(workers: int) -> Iterator[ProcessPoolExecutor]:
    """Give a pool whose processes leave a Ctrl-C to this one, and end when this one does."""
    import multiprocessing
    from concurrent.futures import ProcessPoolExecutor

    pool = ProcessPoolExecutor(workers, multiprocessing.get_context("spawn"), initializer=_settle)
    try:
        yield pool
    finally:
        pool.shutdown(wait=True, cancel_futures=True)


@contextlib.contextmanager
def _deaf() -> Iterator[None]:
    """Keep processes that are started meanwhile from hearing a Ctrl-C, even before their first line."""
    if not hasattr(signal, "pthread_sigmask"):
        yield
        return
    before = signal.pthread_sigmask(signal.SIG_BLOCK, {signal.SIGINT})
    try:
        yield
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, before)


def _settle() -> None:
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    threading.Thread(target=_end_with_parent, daemon=True).start()


def _end_with_parent() -> None:
    import multiprocessing
    import os
    from multiprocessing.connection import wait

    parent = multiprocessing.parent_process()
    assert parent is not None
    wait([parent.sentinel])
    os._exit(1)


def on_cluster(job: Job, sets: Iterable[ParameterSet], address: str) -> Generator[Outcome, None, None]:
    """Run sets on a Dask cluster, yielding outcomes as they come.

    Dask gives the sets of a worker that is lost to another.

    Raises
    ------
    UnusableInput
        If Dask is not installed, or there is no scheduler at the address.
    """
    with _client(address) as client:
        from dask.distributed import as_completed

        left = iter(sets)
        waiting: dict[Any, ParameterSet] = {}
        done = as_completed(loop=client.loop)

        def submit(chosen: ParameterSet) -> None:
            key = f"set-{chosen.name}-{job.content(chosen)[:16]}"
            future = client.submit(run_set, job, chosen, key=key, pure=False)
            waiting[future.key] = chosen
            done.add(future)

        room = AHEAD * max(2, sum(client.nthreads().values()))
        for chosen in islice(left, room):
            submit(chosen)
        for future in done:
            chosen = waiting.pop(future.key)
            lost = future.status != "finished"
            yield (failed(job, chosen, f"the cluster says: {future.exception()!r}") if lost else future.result())
            for following in islice(left, 1):
                submit(following)


def _client(address: str) -> Any:
    try:
        from dask.distributed import Client
    except ImportError:
        remedy = 'Install it: pip install "slopewell[dask]".'
        raise UnusableInput([Problem("--scheduler", "Dask is not installed.", remedy)]) from None
    if not re.fullmatch(r"(?:[a-z]+://)?[^\s/]+:\d+/?", address):
        says = f'"{address}" is no address of a Dask scheduler.'
        raise UnusableInput([Problem("--scheduler", says, "Write it like tcp://host:8786.")])
    try:
        return Client(address, timeout=PATIENCE, set_as_default=False)
    except (OSError, ValueError) as error:
        says = f'No Dask scheduler answers at "{address}": {str(error)[:120] or "it took too long"}.'
        raise UnusableInput([Problem("--scheduler", says, "Give the address that it prints as it starts.")]) from None
