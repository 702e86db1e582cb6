"""What is known of parts apart from any duty: how a data sheet is set out, units and symbols."""
