"""The response of a driven model: interval by interval, free and forced, steady and transient."""
