"""Services that tests start for themselves, each private to the test run, and the tests of running the application."""
