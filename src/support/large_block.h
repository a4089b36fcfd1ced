// Memory for pictures and large tables.
#pragma once

#include <cstddef>
#include <new>
#include <utility>

namespace tincture {

// `bytes` of zeroed memory, aligned for any type, in huge pages where the system has them: a
// picture in small pages spends as long on page faults as on being decoded. Throws std::bad_alloc.
class LargeBlock {
  public:
    LargeBlock() = default;
    explicit LargeBlock(std::size_t bytes);
    LargeBlock(LargeBlock&& other) noexcept
        : memory_(std::exchange(other.memory_, nullptr)), bytes_(std::exchange(other.bytes_, 0)) {}
    LargeBlock& operator=(LargeBlock&& other) noexcept {
        std::swap(memory_, other.memory_);
        std::swap(bytes_, other.bytes_);
        return *this;
    }
    ~LargeBlock();

    [[nodiscard]] void* data() const noexcept { return memory_; }

  private:
    void* memory_ = nullptr;
    std::size_t bytes_ = 0;
};

// A fixed number of zeros of a plain type in a LargeBlock.
template <typename T>
class LargeArray {
  public:
    LargeArray() = default;
    explicit LargeArray(std::size_t size) : block_(bytes_for(size)), size_(size) {}
    LargeArray(LargeArray&& other) noexcept
        : block_(std::move(other.block_)), size_(std::exchange(other.size_, 0)) {}
    LargeArray& operator=(LargeArray&& other) noexcept {
        block_ = std::move(other.block_);
        size_ = std::exchange(other.size_, 0);
        return *this;
    }

    [[nodiscard]] T* data() noexcept { return static_cast<T*>(block_.data()); }
    [[nodiscard]] const T* data() const noexcept { return static_cast<const T*>(block_.data()); }
    [[nodiscard]] std::size_t size() const noexcept { return size_; }
    [[nodiscard]] bool empty() const noexcept { return size_ == 0; }
    [[nodiscard]] T& operator[](std::size_t i) noexcept { return data()[i]; }
    [[nodiscard]] const T& operator[](std::size_t i) const noexcept { return data()[i]; }

  private:
    static std::size_t bytes_for(std::size_t size) {
        if (size > static_cast<std::size_t>(-1) / sizeof(T)) throw std::bad_alloc();
        return size * sizeof(T);
    }
    LargeBlock block_;
    std::size_t size_ = 0;
};

}  // namespace tincture
