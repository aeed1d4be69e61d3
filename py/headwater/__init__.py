"""Whether an inboard water-jet boat's pump holds water, here and today."""

__version__ = "0.1.0"
