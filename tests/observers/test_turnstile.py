"""First come, first served."""

import threading
import time

from observers.actions.write_transaction import Turnstile


def test_threads_pass_in_the_order_in_which_they_came():
    turnstile, passed, threads = Turnstile(), [], []
    turnstile.enter()
    for number in range(8):
        threads.append(_visitor(turnstile, passed, number))
        while len(turnstile._waiting) <= number:
            time.sleep(0.001)
    turnstile.leave()
    for thread in threads:
        thread.join(timeout=10)
    assert passed == list(range(8))


def test_the_holder_may_enter_again():
    turnstile = Turnstile()
    turnstile.enter()
    turnstile.enter()
    turnstile.leave()
    passed = []
    visitor = _visitor(turnstile, passed, 1)
    visitor.join(timeout=0.05)
    assert passed == []
    turnstile.leave()
    visitor.join(timeout=10)
    assert passed == [1]


def _visitor(turnstile, passed, number):
    def visit():
        turnstile.enter()
        passed.append(number)
        turnstile.leave()

    thread = threading.Thread(target=visit)
    thread.start()
    return thread
