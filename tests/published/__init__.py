"""Numbers that others published, one module per source; `table` sets ours beside theirs."""
