"""What can go wrong, each kind once, with a sentence a user can act on.

Bad input and failed computations are told apart because the command line ends with 2 for the first and 1 for the
second. All messages are one sentence and name what was given and what is allowed.
"""


class MassdashError(Exception):
    """Base of everything this program raises on purpose; ``str(error)`` is one sentence for a person."""


class InputError(MassdashError, ValueError):
    """A value, file or option that cannot be accepted.

    The message says which name was given which value and what is allowed; ``name``, ``got`` and ``allowed`` keep the
    three parts for programs, ``where`` the file they came from.
    """

    def __init__(self, message, *, name=None, got=None, allowed=None, where=None):
        super().__init__(message)
        self.name, self.got, self.allowed, self.where = name, got, allowed, where

    def __reduce__(self):
        keywords = {"name": self.name, "got": self.got, "allowed": self.allowed, "where": self.where}
        return _rebuild_input_error, (type(self), str(self), keywords)


def _rebuild_input_error(kind, message, keywords):
    return kind(message, **keywords)


class ComputationError(MassdashError, ArithmeticError):
    """A calculation that found no answer for acceptable input."""


class NotAvailable(MassdashError, LookupError):
    """A quantity that does not apply to this star; the message is the note that says why."""


def refuse(name, got, allowed, *, where=None):
    """The one wording for refused input: ``mass: inf is not allowed; give 100 to 1e8 solMass``."""
    place = f"{where}: " if where else ""
    sentence = f"{place}{name}: {got} is not allowed; give {allowed}"
    return InputError(sentence, name=name, got=got, allowed=allowed, where=where)
