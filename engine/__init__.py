"""The physics of the stepped-waveform bridge: SI units throughout, no Qt."""
