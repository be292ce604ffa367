@echo off
rem Starts Backcone on Windows. Builds it on first use, then runs it with a start-up archive made once per build.
setlocal enableextensions
set "HOME_DIR=%~dp0"
set "APP=%HOME_DIR%server\target\backcone.jar"
set "FLAGS=-XX:+UseSerialGC -XX:+IgnoreUnrecognizedVMOptions -Xshare:auto -Xlog:disable -Xlog:all=error:stderr -Xss4m"
set "CACHE=%LOCALAPPDATA%\backcone"

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

rem the background half of the first run, below
if "%~1"=="--make-archive" (
  "%JAVA%" %FLAGS% -XX:TieredStopAtLevel=1 "-XX:ArchiveClassesAtExit=%~2.new" -jar "%APP%" self-test >nul 2>nul
  if exist "%~2.new" move /y "%~2.new" "%~2" >nul 2>nul
  exit /b 0
)

if not exist "%APP%" (
  where mvn >nul 2>nul || (
    echo backcone: it must be built first, and there is no Maven to do it. Install Maven 3.8.7 or newer. 1>&2
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

if /i not "%~1"=="serve" if /i not "%~1"=="explore" set "FLAGS=%FLAGS% -XX:TieredStopAtLevel=1 -Xmn24m"
for %%A in ("%APP%") do set "KEY=%%~zA-%%~tA"
set "KEY=%KEY:/=-%"
set "KEY=%KEY::=-%"
set "KEY=%KEY: =-%"
set "ARCHIVE=%CACHE%\%KEY%.jsa"
if exist "%ARCHIVE%" (
  "%JAVA%" %FLAGS% "-XX:SharedArchiveFile=%ARCHIVE%" -jar "%APP%" %*
  exit /b
)
if defined LOCALAPPDATA if not exist "%ARCHIVE%.new" (
  if not exist "%CACHE%" mkdir "%CACHE%" >nul 2>nul
  start "" /b cmd /c "%~f0" --make-archive "%ARCHIVE%"
)
"%JAVA%" %FLAGS% -jar "%APP%" %*
exit /b
