"""One file a pane, one stylesheet, the terminal driver."""
