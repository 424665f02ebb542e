"""The compiled part: flat numbers in, flat numbers out, one lane a car.

`layout` says where every number lives; `rest` solves ride height; `physics` is the
right-hand side, made of `links`, `springs`, `wheels`, `tyre` and `drivetrain`;
`march` steps it through time and knows no physics; `watch` keeps peaks and
events; `lanes` runs many cars; `linear` linearises at rest.
"""
