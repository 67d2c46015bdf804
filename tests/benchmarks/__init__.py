"""Measurements that are run by hand; never part of the tests."""
