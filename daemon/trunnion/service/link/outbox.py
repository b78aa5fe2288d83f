"""The one order that waits for the driver: the newest wins, and an emergency bars all motion."""

from threading import RLock

from trunnion.safety.verdict import Halt, Move, Order


class Outbox:
    """Room for one order; every method may be called from any thread and never blocks."""

    def __init__(self) -> None:
        self._lock = RLock()  # a signal may bar motion in the middle of any of these
        self._order: Order | None = None
        self._connection = 0
        self._is_barred = False
        self._must_cut_power = False

    def put(self, order: Order, connection: int) -> None:
        """Keep this order, made by a reading of this connection, instead of any older one."""
        with self._lock:
            self._order, self._connection = order, connection

    def bar(self) -> None:
        """Let nothing but halts out from now on."""
        with self._lock:
            self._is_barred = True

    def cut_power(self) -> None:
        """Want the motors without power until released; nothing while motion is not barred."""
        with self._lock:
            self._must_cut_power = self._is_barred

    @property
    def must_cut_power(self) -> bool:
        """Whether the motors are to be without power."""
        return self._must_cut_power

    def release(self) -> None:
        """Let orders out again that are put in from now on, and motors have power."""
        with self._lock:
            self._is_barred, self._must_cut_power, self._order = False, False, None

    def take(self, connection: int) -> Order | None:
        """Take out what is to be sent now on this connection; a halt every time while barred."""
        with self._lock:
            order, self._order = self._order, None
            if self._is_barred:
                return Halt()
            is_stale = isinstance(order, Move) and self._connection != connection
            return None if is_stale else order
