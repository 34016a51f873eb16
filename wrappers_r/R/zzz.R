.onLoad <- function(libname, pkgname) {
  compiled <- raw_header_constants()
  loaded <- list(raw_version(), raw_stream_version(), raw_message_bytes())
  if (!identical(compiled, loaded)) {
    stop(
      "folkmote: the kernel that was loaded is not the one this package was built with; install the package again.",
      call. = FALSE
    )
  }
}
