@echo off
rem Starts Backcone on Windows. Builds it on first use, then runs it with a start-up archive made once per build.
setlocal enableextensions
set "HOME_DIR=%~dp0"
set "APP=%HOME_DIR%server\target\backcone.jar"
if defined JAVA_HOME (
  set "JAVA=%JAVA_HOME%\bin\java.exe"
  if not exist "%JAVA_HOME%\bin\java.exe" (
    echo backcone: JAVA_HOME is %JAVA_HOME%, and there is no bin\java.exe in it. Point it at a JDK 17 or newer, or unset it. 1>&2
    exit /b 70
  )
) else (
  set "JAVA=java"
  where java >nul 2>nul || (
    echo backcone: no Java found. Install a JDK 17 or newer, or point JAVA_HOME at one. 1>&2
    exit /b 70
  )
)
if not exist "%APP%" (
  where mvn >nul 2>nul || (
    echo backcone: it is not built yet, and Maven is not here to build it. Install Maven 3.8.7 or newer. 1>&2
    exit /b 70
  )
  echo backcone: building, about a minute on first use ... 1>&2
  pushd "%HOME_DIR%"
  call mvn -B -q -Dquick -pl server -am package 1>&2 || (
    popd
    echo backcone: the build failed; what Maven said stands above. 1>&2
    exit /b 70
  )
  popd
)
set "FLAGS=-XX:+UseSerialGC -XX:+IgnoreUnrecognizedVMOptions -Xshare:auto -Xlog:disable -Xlog:all=error:stderr -Xss4m"
if /i not "%~1"=="serve" if /i not "%~1"=="explore" set "FLAGS=%FLAGS% -XX:TieredStopAtLevel=1"
for %%A in ("%APP%") do set "KEY=%%~zA-%%~tA"
set "KEY=%KEY:/=-%"
set "KEY=%KEY::=-%"
set "KEY=%KEY: =-%"
set "CACHE=%LOCALAPPDATA%\backcone"
set "ARCHIVE=%CACHE%\%KEY%.jsa"
if exist "%ARCHIVE%" (
  "%JAVA%" %FLAGS% "-XX:SharedArchiveFile=%ARCHIVE%" -jar "%APP%" %*
  exit /b %ERRORLEVEL%
)
if defined LOCALAPPDATA (
  if not exist "%CACHE%" mkdir "%CACHE%" >nul 2>nul
  start "" /b cmd /c ""%JAVA%" %FLAGS% "-XX:ArchiveClassesAtExit=%ARCHIVE%" -jar "%APP%" self-test >nul 2>nul"
)
"%JAVA%" %FLAGS% -jar "%APP%" %*
exit /b %ERRORLEVEL%
