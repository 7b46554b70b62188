"""How many examples a property test draws, and always the same ones.

The ordinary run is small enough for every change. `TENORBOOK_EXAMPLES=20` selects the profile `thorough`,
which draws that many times as many.
"""

import os

from hypothesis import HealthCheck, Phase, settings

TIMES = max(1, int(os.environ.get("TENORBOOK_EXAMPLES", "1")))
PROFILE = "thorough" if TIMES > 1 else "ordinary"

settings.register_profile(
    "ordinary",
    derandomize=True,
    deadline=None,
    database=None,
    phases=[Phase.explicit, Phase.generate, Phase.shrink],
    suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large, HealthCheck.large_base_example],
)
settings.register_profile("thorough", settings.get_profile("ordinary"), print_blob=True)


def examples(number: int) -> settings:
    """The settings of a property test that draws `number` examples in the ordinary run."""
    return settings(settings.get_profile(PROFILE), max_examples=number * TIMES)
