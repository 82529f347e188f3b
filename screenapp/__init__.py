"""screenapp screens flat thin-walled parts: where each is most stressed, and how sure that is."""

__version__ = "0.1.0"
