"""From terms to a dated, exact schedule. The one door is `schedule.build.build`."""
