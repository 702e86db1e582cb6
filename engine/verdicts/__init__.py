"""From the solved bridge and a candidate's ratings to its rows and its verdict."""
