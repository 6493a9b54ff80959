"""A campaign with an invented source, run from outside to practise and to measure."""
