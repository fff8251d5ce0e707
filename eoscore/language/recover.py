def recover(error, faults) -> bool:
    return False
