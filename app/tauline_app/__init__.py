"""The window of Tauline: shows and edits a scenario; computes no physics."""
