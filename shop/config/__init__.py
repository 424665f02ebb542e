"""The Django project: settings, addresses, the worker, and what starts and watches them."""
