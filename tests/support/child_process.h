// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cerrno>
#include <csignal>
#include <cstdlib>
#include <fcntl.h>
#include <optional>
#include <poll.h>
#include <stdexcept>
#include <string>
#include <sys/wait.h>
#include <unistd.h>
#include <utility>
#include <vector>

namespace whichway::testing_support {

/// A program that runs beside the test, with its three standard streams on pipes. It is killed and reaped
/// when the object dies.
class ChildProcess {
public:
    /// @param environment "NAME=value" set in the child on top of the test's own
    explicit ChildProcess(const std::vector<std::string>& command,
                          const std::vector<std::string>& environment = {}) {
        std::signal(SIGPIPE, SIG_IGN);
        int in[2], out[2], err[2];
        if (pipe2(in, O_CLOEXEC) != 0 || pipe2(out, O_CLOEXEC) != 0 || pipe2(err, O_CLOEXEC) != 0)
            throw std::runtime_error("pipe2 failed");
        std::vector<std::string> words = command;
        std::vector<char*> arguments;
        for (std::string& word : words)
            arguments.push_back(word.data());
        arguments.push_back(nullptr);
        process_ = fork();
        if (process_ < 0)
            throw std::runtime_error("fork failed");
        if (process_ == 0) {
            dup2(in[0], 0);
            dup2(out[1], 1);
            dup2(err[1], 2);
            for (const std::string& setting : environment)
                putenv(const_cast<char*>(setting.c_str())); // the child ends or becomes another program
            std::signal(SIGPIPE, SIG_DFL);
            execv(arguments[0], arguments.data());
            _exit(127);
        }
        close(in[0]);
        close(out[1]);
        close(err[1]);
        in_ = in[1];
        out_.descriptor = out[0];
        err_.descriptor = err[0];
    }

    ~ChildProcess() {
        if (!status_) {
            ::kill(process_, SIGKILL);
            wait();
        }
        closeInput();
        closeStream(out_);
        closeStream(err_);
    }
    ChildProcess(const ChildProcess&) = delete;
    ChildProcess& operator=(const ChildProcess&) = delete;

    int id() const { return process_; }

    /// @return false if the program does not read any more
    bool write(std::string text) {
        while (!text.empty()) {
            const ssize_t written = ::write(in_, text.data(), text.size());
            if (written < 0 && errno != EINTR)
                return false;
            if (written > 0)
                text.erase(0, static_cast<std::size_t>(written));
        }
        return true;
    }
    bool writeLine(const std::string& line) { return write(line + "\n"); }
    void closeInput() {
        if (in_ >= 0)
            close(in_);
        in_ = -1;
    }

    /// The next line of standard output, nothing at its end. Bytes without a line end are no line.
    std::optional<std::string> readLine() {
        for (;;) {
            const std::size_t end = out_.text.find('\n', taken_);
            if (end != std::string::npos) {
                std::string line = out_.text.substr(taken_, end - taken_);
                taken_ = end + 1;
                return line;
            }
            if (!readMore())
                return std::nullopt;
        }
    }

    void kill() { ::kill(process_, SIGKILL); }

    /// Closes the input and reads both streams to their ends. @return exit code, or minus the signal
    int finish() {
        closeInput();
        while (readMore()) {
        }
        return wait();
    }

    const std::string& output() const { return out_.text; }
    const std::string& errors() const { return err_.text; }

private:
    struct Stream {
        int descriptor = -1;
        std::string text = {};
    };

    static void closeStream(Stream& stream) {
        if (stream.descriptor >= 0)
            close(stream.descriptor);
        stream.descriptor = -1;
    }

    /// Waits for something on either stream. @return false when both have ended
    bool readMore() {
        pollfd waiting[] = {{.fd = out_.descriptor, .events = POLLIN, .revents = 0},
                            {.fd = err_.descriptor, .events = POLLIN, .revents = 0}};
        if (out_.descriptor < 0 && err_.descriptor < 0)
            return false;
        if (poll(waiting, 2, -1) < 0)
            return errno == EINTR;
        if (waiting[0].revents != 0)
            readFrom(out_);
        if (waiting[1].revents != 0)
            readFrom(err_);
        return true;
    }

    static void readFrom(Stream& stream) {
        char bytes[4096];
        const ssize_t count = ::read(stream.descriptor, bytes, sizeof bytes);
        if (count > 0)
            stream.text.append(bytes, static_cast<std::size_t>(count));
        else if (count == 0 || errno != EINTR)
            closeStream(stream);
    }

    int wait() {
        if (!status_) {
            int status = 0;
            while (waitpid(process_, &status, 0) < 0 && errno == EINTR) {
            }
            status_ = WIFEXITED(status) ? WEXITSTATUS(status) : -WTERMSIG(status);
        }
        return *status_;
    }

    pid_t process_ = -1;
    int in_ = -1;
    Stream out_, err_;
    std::size_t taken_ = 0; ///< of out_.text, as lines
    std::optional<int> status_;
};

/// Runs a program to its end with `input` on its standard input.
struct Finished {
    int exitCode = 0; ///< or minus the signal
    std::string output = {}, errors = {};
};
inline Finished run(const std::vector<std::string>& command, const std::string& input = "",
                    const std::vector<std::string>& environment = {}) {
    ChildProcess child(command, environment);
    child.write(input);
    const int code = child.finish();
    return {.exitCode = code, .output = child.output(), .errors = child.errors()};
}

} // namespace whichway::testing_support
