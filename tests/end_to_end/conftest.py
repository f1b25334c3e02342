"""A real OpenSSH server on loopback, for the tests that log in."""

import getpass
import shutil
import socket
import subprocess
import time
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import pytest


@dataclass(frozen=True)
class SshServer:
    """Where it listens and with which key one gets in."""

    port: int
    key: Path
    known_hosts: Path

    def login(self, command: str = "", *, tty: bool = True) -> list[str]:
        """The ssh command line of a client; `command` is what the remote shell runs."""
        options = [
            "-F", "none", "-p", str(self.port), "-i", str(self.key), "-o", "IdentitiesOnly=yes",
            "-o", "StrictHostKeyChecking=accept-new", "-o", f"UserKnownHostsFile={self.known_hosts}",
            "-o", "LogLevel=ERROR",
        ]  # fmt: skip
        return [
            "ssh",
            "-tt" if tty else "-T",
            *options,
            f"{getpass.getuser()}@127.0.0.1",
            *([command] if command else []),
        ]


def _free_port() -> int:
    with socket.socket() as listener:
        listener.bind(("127.0.0.1", 0))
        port: int = listener.getsockname()[1]
        return port


@pytest.fixture(scope="session")
def ssh_server(tmp_path_factory: pytest.TempPathFactory) -> Iterator[SshServer]:
    """Started for the session, stopped at its end. Skipped where Debian's openssh-server is not installed."""
    daemon = shutil.which("sshd", path="/usr/sbin:/usr/local/sbin:/usr/bin")
    if daemon is None or shutil.which("ssh") is None:
        pytest.skip("needs an OpenSSH server and client: apt-get install openssh-server openssh-client")
    folder = tmp_path_factory.mktemp("sshd")
    folder.chmod(0o700)
    for name in ("host", "client"):
        subprocess.run(["ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-f", str(folder / name)], check=True)
    (folder / "authorized_keys").write_bytes((folder / "client.pub").read_bytes())
    (folder / "authorized_keys").chmod(0o600)
    port = _free_port()
    config = folder / "sshd_config"
    config.write_text(
        f"Port {port}\nListenAddress 127.0.0.1\nHostKey {folder / 'host'}\nPidFile none\nUsePAM no\n"
        f"AuthorizedKeysFile {folder / 'authorized_keys'}\nStrictModes no\nPasswordAuthentication no\n"
        "PermitRootLogin prohibit-password\nPrintMotd no\nPrintLastLog no\n"
    )
    # The daemon separates its privileges into this folder; a packaged service would make it.
    Path("/run/sshd").mkdir(mode=0o755, exist_ok=True)
    log = open(folder / "sshd.log", "w")  # noqa: SIM115
    server = subprocess.Popen([daemon, "-D", "-e", "-f", str(config)], stderr=log)
    try:
        deadline = time.monotonic() + 10
        while True:
            try:
                socket.create_connection(("127.0.0.1", port), timeout=1).close()
                break
            except OSError:
                if server.poll() is not None or time.monotonic() > deadline:
                    pytest.fail(f"sshd did not start: {(folder / 'sshd.log').read_text()}")
                time.sleep(0.05)
        yield SshServer(port, folder / "client", folder / "known_hosts")
    finally:
        server.terminate()
        server.wait(10)
        log.close()
