"""Quality: whether a lead can be trusted with a judgement."""
