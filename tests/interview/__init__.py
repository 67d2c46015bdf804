"""Tests of the interview without a screen."""
