DEVIATIONS: dict[int, str] = {}
NOT_ENTERED: set[str] = set()
